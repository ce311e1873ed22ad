import { Command, CommanderError, InvalidArgumentError, Option } from 'commander';
import { isSeed, SEED_RULE } from '../study/seed.js';
import { EXIT_STATUS, type ExitStatus } from './exit-status.js';
import type { Shell } from './shell.js';

const STATUS_HELP = `
Exit status:
  0  done
  1  a fault of this program, with its stack and how to report it
  2  command line, study or input
  3  the candidate of run --require fails an acceptance line
  4  whether it meets them all is not decided
  5  the run ended with blocks missing, or results that could not be written
  6  status: the run goes on
  7  verify found something that is not as it was
  129, 130, 143  interrupted (hang-up, Ctrl-C, termination)
`;

const TRACE_HELP = `
modules.csv has module_degC where modules leave 25 degC, and equaliser_A where the candidate has an equaliser:
what the device between a module and the next one takes, from the next if positive.

Example: motleybank trace results/demo --candidate strings --instance 66`;

const CAUTION_HELP = `
Caution: a study, not an approval. Fuse every string, keep the maker's series and parallel limits,
follow local code and a licensed practitioner.
`;

/**
 * Runs one command line. What a command needs is loaded when it is called, so that help and faults come at once.
 *
 * @param args words after the name of the program
 * @param version of the package
 * @returns the exit status
 */
export async function runProgram(args: readonly string[], version: string, shell: Shell): Promise<ExitStatus> {
  const { program, status } = buildProgram(version, shell);
  try {
    await program.parseAsync(args, { from: 'user' });
    return status();
  } catch (error) {
    if (error instanceof CommanderError) return error.exitCode === 0 ? EXIT_STATUS.done : EXIT_STATUS.input;
    shell.err(ourFault(error));
    return EXIT_STATUS.ourFault;
  }
}

function ourFault(error: unknown): string {
  const stack = error instanceof Error ? (error.stack ?? error.message) : String(error);
  return `${stack}\nThis is a fault of motleybank. Please report it to its developers with this text and the study.\n`;
}

function buildProgram(version: string, shell: Shell): { program: Command; status: () => ExitStatus } {
  let status: ExitStatus = EXIT_STATUS.done;
  const program = new Command('motleybank')
    .description('Simulates many sampled banks of unlike battery modules and compares ways of wiring them.')
    .version(version)
    .option('--no-color', 'no colour on the screen (also: the environment variable NO_COLOR)')
    .addHelpText(
      'after',
      `\nExample: motleybank new first.yaml && motleybank run first.yaml\n${STATUS_HELP}${CAUTION_HELP}`,
    )
    .showHelpAfterError('(--help tells more)')
    .configureOutput({ writeOut: shell.out, writeErr: shell.err })
    .exitOverride();
  const shellFor = (): Shell => (program.opts<{ color: boolean }>().color ? shell : { ...shell, color: false });

  program
    .command('run <study>')
    .description('simulate a study, print its decision table and write its results; takes up what is missing')
    .option('--out <folder>', 'folder of the results (default: results/<study file name>)')
    .addOption(new Option('--threads <count>', 'threads; never changes a result').argParser(wholeNumber(1, 1024)))
    .addOption(new Option('--seed <seed>', "in place of the study's").argParser(seedText))
    .addOption(new Option('--instances <count>', "in place of the study's").argParser(wholeNumber(1, 10_000_000)))
    .addOption(
      new Option(
        '--stall-minutes <minutes>',
        'a thread that finishes no bank for so long is ended, and its block tried again (default: 10)',
      ).argParser(positiveNumber),
    )
    .addOption(
      new Option(
        '--may-fail <percent>',
        'banks of each candidate that may fail to converge; they are listed and left out (default: 0)',
      ).argParser(percentage),
    )
    .option('--require <candidate>', 'end with status 3 if it fails an acceptance line, 4 if that is not decided')
    .option('--replace', 'discard what another run left in the folder')
    .option('--json', 'one JSON document in place of the table')
    .option('--quiet', 'results and faults only')
    .option('--log <file>', 'append a JSON object per line: start, progress every minute, notes, end')
    .addHelpText('after', '\nExample: motleybank run studies/demo.yaml --out results/demo')
    .action(async (study: string, options: RunFlags) => {
      const { runCommand } = await import('./run.js');
      const { mayFail: mayFailPercent, ...rest } = options;
      status = await runCommand({ study, mayFailPercent, ...rest }, shellFor());
    });

  program
    .command('check <study>')
    .description('print the resolved study with the origin of every value, warnings and the time a run takes')
    .option('--json', 'one JSON document in place of the table')
    .option('--quiet', 'warnings and faults only')
    .addHelpText('after', '\nExample: motleybank check studies/demo.yaml')
    .action(async (study: string, options: { json?: boolean; quiet?: boolean }) => {
      const [{ checkCommand }, { simulationAids }] = await Promise.all([
        import('./check.js'),
        import('./simulation-aids.js'),
      ]);
      status = checkCommand({ study, ...options }, shellFor(), simulationAids);
    });

  program
    .command('trace <source>')
    .description('replay one sampled bank of a study, or of a folder of results, step by step')
    .requiredOption('--candidate <name>', 'candidate')
    .addOption(
      new Option('--instance <number>', 'sampled bank, from 1')
        .argParser(wholeNumber(1, 10_000_000))
        .makeOptionMandatory(),
    )
    .addOption(
      new Option('--from-cycle <cycle>', 'first cycle (default: the last two)').argParser(wholeNumber(1, 36_500)),
    )
    .addOption(new Option('--to-cycle <cycle>', 'last cycle').argParser(wholeNumber(1, 36_500)))
    .addOption(new Option('--every <seconds>', 'one row every so many seconds').argParser(positiveNumber))
    .option('--out <folder>', 'folder for drawn.csv, modules.csv, bus.csv and events.csv')
    .option('--netlist <file>', 'write the window as a SPICE deck too, from where the bank stands at its start')
    .option('--like-for-like', 'leave out of the trace, from the start of the window on, what the deck leaves out')
    .addHelpText('after', TRACE_HELP)
    .action(async (source: string, options: TraceFlags) => {
      const { traceCommand } = await import('./trace.js');
      const { every: everyS, ...rest } = options;
      status = await traceCommand({ source, everyS, version, ...rest }, shellFor());
    });

  program
    .command('status <folder>')
    .description('tell from the folder of a run alone how it stands: running, complete, or ended with blocks missing')
    .option('--json', 'one JSON document in place of the lines')
    .addHelpText('after', '\nExample: motleybank status results/demo')
    .action(async (folder: string, options: { json?: boolean }) => {
      const { statusCommand } = await import('./status.js');
      status = await statusCommand({ folder, ...options }, shellFor(), Date.now());
    });

  program
    .command('verify <folder>')
    .description('compare a folder of results with its checksums, compute some of its blocks again')
    .addOption(
      new Option('--blocks <count>', 'blocks to be computed again, evenly spread (default: 8)').argParser(
        wholeNumber(0, 10_000_000),
      ),
    )
    .addOption(new Option('--threads <count>', 'threads; never changes a result').argParser(wholeNumber(1, 1024)))
    .option('--json', 'one JSON document in place of the lines')
    .addHelpText(
      'after',
      `
Writes nothing. Exit status 0 if all is identical, 7 if something is not.

Example: motleybank verify results/demo --blocks 20`,
    )
    .action(async (folder: string, options: { blocks?: number; threads?: number; json?: boolean }) => {
      const { verifyCommand } = await import('./verify.js');
      status = await verifyCommand({ folder, ...options }, shellFor());
    });

  program
    .command('new <file>')
    .description('write a first study of a few lines; never overwrites')
    .option('--quiet', 'faults only')
    .addHelpText('after', '\nExample: motleybank new first.yaml')
    .action(async (file: string, options: { quiet?: boolean }) => {
      const { newCommand } = await import('./new.js');
      status = newCommand({ file, ...options }, shellFor());
    });

  program
    .command('schema')
    .description('print the JSON Schema of study files, for editors')
    .option('--keys', 'all keys as Markdown tables for people, in place of the schema')
    .option('--out <file>', 'write it to a file')
    .addHelpText('after', '\nExample: motleybank schema --out study.schema.json')
    .action(async (options: { keys?: boolean; out?: string }) => {
      const { schemaCommand } = await import('./schema.js');
      status = schemaCommand(options, shellFor());
    });

  return { program, status: () => status };
}

interface RunFlags {
  readonly out?: string;
  readonly threads?: number;
  readonly seed?: string;
  readonly instances?: number;
  readonly stallMinutes?: number;
  readonly mayFail?: number;
  readonly require?: string;
  readonly replace?: boolean;
  readonly json?: boolean;
  readonly quiet?: boolean;
  readonly log?: string;
}

interface TraceFlags {
  readonly candidate: string;
  readonly instance: number;
  readonly fromCycle?: number;
  readonly toCycle?: number;
  readonly every?: number;
  readonly out?: string;
  readonly netlist?: string;
  readonly likeForLike?: boolean;
}

function wholeNumber(least: number, most: number): (text: string) => number {
  return (text) => {
    const value = Number(text);
    if (/^\d+$/.test(text) && value >= least && value <= most) return value;
    throw new InvalidArgumentError(`It must be a whole number from ${least} to ${most}.`);
  };
}

function seedText(text: string): string {
  // A text that begins with a hyphen is the next option: the seed was left out.
  if (isSeed(text) && !text.startsWith('-')) return text;
  throw new InvalidArgumentError(`It must be ${SEED_RULE}.`);
}

function percentage(text: string): number {
  const value = Number(text);
  if (text.trim() !== '' && value >= 0 && value <= 100) return value;
  throw new InvalidArgumentError('It must be a number from 0 to 100.');
}

function positiveNumber(text: string): number {
  const value = Number(text);
  if (text.trim() !== '' && value > 0 && Number.isFinite(value)) return value;
  throw new InvalidArgumentError('It must be a number above 0.');
}
