import { asciiText, SCREEN_COLUMNS, wrapText } from '../output/plain-text.js';
import type { ProspectiveCurrent } from '../simulation/prospective-current.js';
import { isChargerBeyondBms } from '../study/bank-limit-warnings.js';
import { nominalModules } from '../study/bank-module.js';
import { bleedInForce } from '../study/bleed-in-force.js';
import type { Candidate, Study } from '../study/study.js';
import { elapsedNote } from './elapsed-note.js';
import { EXIT_STATUS, type ExitStatus } from './exit-status.js';
import { type LoadedStudy, loadStudy } from './load-study.js';
import { renderOrigins } from './origin-table.js';
import type { Shell } from './shell.js';
import { breakingWarnings, shortCircuitLines } from './short-circuit.js';
import { bankCycles, type CheckAids, type Trial, type TwinFacts } from './trial.js';

/** What `check` is told on the command line. */
export interface CheckOptions {
  /** Study file. */
  readonly study: string;
  /** One JSON document in place of the table. */
  readonly json?: boolean | undefined;
  /** Warnings and faults only: no table, no trial. */
  readonly quiet?: boolean | undefined;
}

/** Prints the resolved study with the origin of every value, warnings, and how long a run would take. */
export function checkCommand(options: CheckOptions, shell: Shell, aids: CheckAids): ExitStatus {
  const loaded = loadStudy(options.study, shell);
  if (loaded === null) return EXIT_STATUS.input;
  const { study } = loaded;
  const currents = aids.prospectiveCurrents(study);
  const twins = aids.twins(study);
  const warnings = [...loaded.warnings, ...twinWarnings(study, twins), ...breakingWarnings(study, currents)];
  if (options.quiet) {
    for (const warning of warnings) shell.err(`warning: ${asciiText(warning)}\n`);
    return EXIT_STATUS.done;
  }
  const checked = { warnings, notes: notesOn(study, twins), currents, trial: aids.trial(study, shell.now) };
  shell.out(options.json ? renderCheckJson(loaded, checked) : renderCheck(loaded, checked));
  return EXIT_STATUS.done;
}

function notesOn(study: Study, twins: readonly TwinFacts[]): readonly string[] {
  return [bleedInForce(study), elapsedNote(study, twins)].filter((note) => note !== null);
}

function twinWarnings(study: Study, twins: readonly TwinFacts[]): readonly string[] {
  const losing = study.candidates.filter((_, index) => twins[index]?.losesLoad);
  const isBeyond = (candidate: Candidate): boolean =>
    isChargerBeyondBms(study, candidate, nominalModules(study, candidate));
  return [
    ...ofTwins(
      losing.filter((candidate) => !isBeyond(candidate)),
      'the duty is too much even without spread: ',
      'lighten the load, charge more, lower the low-voltage disconnect or take more capacity before comparing wirings',
    ),
    ...ofTwins(
      losing.filter(isBeyond),
      '',
      'the charger can give more than their BMSs let in: lower limit_A of the charger before comparing wirings',
    ),
  ];
}

function ofTwins(losing: readonly Candidate[], before: string, advice: string): readonly string[] {
  if (losing.length === 0) return [];
  return [`${before}the twin loses load (${losing.map(({ key }) => key).join(', ')}); ${advice}`];
}

/** What there is to say of a study beside its values. */
interface Checked {
  readonly warnings: readonly string[];
  readonly notes: readonly string[];
  readonly currents: readonly ProspectiveCurrent[];
  readonly trial: Trial;
}

function renderCheck({ study, origins }: LoadedStudy, { warnings, notes, currents, trial }: Checked): string {
  const lines = [
    ...wrapText(asciiText(study.title)),
    '',
    ...renderOrigins(origins),
    '',
    'prospective short-circuit current, every path closed, full',
    ...shortCircuitLines(study, currents).flatMap((line) =>
      wrapText(line, SCREEN_COLUMNS, { first: '  ', others: '    ' }),
    ),
    '',
    ...warnings.flatMap((warning) => wrapText(`warning: ${asciiText(warning)}`)),
    ...notes.flatMap((note) => wrapText(`note: ${asciiText(note)}`)),
    '',
    ...wrapText(
      `${bankCycles(study)} bank-cycles (${study.instances} banks x ${study.cycles} cycles x ` +
        `${study.candidates.length} candidates), about ${minutesText(study, trial)} on one thread`,
    ),
  ];
  return `${lines.join('\n')}\n`;
}

function renderCheckJson({ study, origins }: LoadedStudy, { warnings, notes, currents, trial }: Checked): string {
  const estimate = { bank_cycles: bankCycles(study), minutes_on_one_thread: minutes(study, trial) };
  const shortCircuit = study.candidates.map(({ key }, index) => ({
    candidate: key,
    bank_A: currents[index]?.bankA,
    string_A: currents[index]?.stringA,
    string_fuse_A: currents[index]?.fuseA,
  }));
  const document = { study, origins, warnings, notes, prospective_short_circuit: shortCircuit, estimate };
  return `${JSON.stringify(document, null, 2)}\n`;
}

function minutes(study: Study, { bankCyclesPerSecond }: Trial): number {
  return bankCycles(study) / bankCyclesPerSecond / 60;
}

function minutesText(study: Study, trial: Trial): string {
  const value = minutes(study, trial);
  if (value < 0.1) return 'a few seconds';
  return `${value < 10 ? value.toFixed(1) : Math.round(value)} min`;
}
