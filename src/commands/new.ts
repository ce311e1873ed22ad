import { EXIT_STATUS, type ExitStatus } from './exit-status.js';
import type { Shell } from './shell.js';

/** What `new` is told on the command line. */
export interface NewOptions {
  /** Study file to write. */
  readonly file: string;
  readonly quiet?: boolean | undefined;
}

/** First study of a new user: complete, short, and run within about twenty seconds on one core. */
export const FIRST_STUDY = `motleybank: 1                # version of this file format
title: First study, 24 V, two newer and two older modules (invented data)
seed: 1
instances: 128               # sampled banks; every candidate gets the same modules
cycles: 60                   # one cycle = one pass of the duty's phases

stock:
  newer:
    grade: new-same-make     # or mixed-purchase, older: fills in every spread that is not written out
    modules: [N1, N2]
    rated_Ah: 100
  older:
    grade: older
    modules: [O1, O2]
    rated_Ah: 100

duty:
  load_factor: {nominal: 1, bank_sd_percent: 5}
  phases:
    - {charge: to-full, at_most_h: 16}
    - {discharge_W: 520, for_h: 8}

candidates:                  # each string is listed from its negative end
  strings:       {wiring: strings, modules: [[N1, N2], [O1, O2]]}
  strings-mixed: {wiring: strings, modules: [[N1, O1], [N2, O2]]}
  cross-linked:  {wiring: cross-linked, modules: [[N1, N2], [O1, O2]], link_mOhm: 1}
acceptance:
  - {measure: load_lost, at_most_percent: 5}
`;

/** Writes a first study; a file that is there is never overwritten. */
export function newCommand({ file, quiet }: NewOptions, shell: Shell): ExitStatus {
  if (shell.exists(file)) {
    shell.err(`${file} is there already and is not overwritten\n`);
    return EXIT_STATUS.input;
  }
  const problem = shell.createText(file, FIRST_STUDY);
  if (problem !== null) {
    shell.err(`${file} cannot be written: ${problem}\n`);
    return EXIT_STATUS.input;
  }
  if (!quiet) shell.err(`wrote ${file}; next: motleybank check ${file}, then motleybank run ${file}\n`);
  return EXIT_STATUS.done;
}
