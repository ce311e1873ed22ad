import { availableParallelism } from 'node:os';
import { parseArgs } from 'node:util';
import { type OracleBank, type OracleResult, oracleBanks } from './oracle-bank.js';
import { faultsOf, renderOracle, renderOracleCsv } from './render-oracle.js';

const HELP = `npm run oracle [-- [--csv] [BANK...]]

Holds the engine against a general-purpose circuit simulator: four banks from outside and small random ones, each
traced like for like with its SPICE deck, and the deck run at tight tolerances. Prints how far they are apart, what
happened, and what either took. All banks take some minutes of processor time; name banks to run those only.

  --csv    one row for each bank instead of tables
  --list   names of the banks
  --help   this

Exit status: 0 all agree within the limits; 1 some do not, or the simulator gave one up (said below the tables);
2 wrong use.
`;

/** Runs the suite, or some of its banks. @returns exit status */
export async function oracleCommand(args: readonly string[]): Promise<number> {
  const options = readOptions(args);
  if ('problem' in options) {
    process.stderr.write(`${options.problem}\n\n${HELP}`);
    return 2;
  }
  if (options.help) {
    process.stdout.write(HELP);
    return 0;
  }
  if (options.list) {
    process.stdout.write(`${options.banks.map(({ name }) => name).join('\n')}\n`);
    return 0;
  }
  const { results, failures } = await simulateAll(options.banks);
  if (results.length > 0) process.stdout.write(options.csv ? await renderOracleCsv(results) : renderOracle(results));
  const faults = [...(options.csv ? results.flatMap(faultsOf) : []), ...failures];
  for (const fault of faults) process.stderr.write(`${fault}\n`);
  return failures.length === 0 && results.every((result) => faultsOf(result).length === 0) ? 0 : 1;
}

function readOptions(args: readonly string[]) {
  try {
    const { values, positionals } = parseArgs({
      args: [...args],
      allowPositionals: true,
      options: {
        csv: { type: 'boolean', default: false },
        list: { type: 'boolean', default: false },
        help: { type: 'boolean', default: false },
      },
    });
    const all = oracleBanks();
    const unknown = positionals.find((name) => !all.some((bank) => bank.name === name));
    if (unknown !== undefined) return { problem: `BANK must be one that --list names, got ${unknown}` };
    const banks = positionals.length === 0 ? all : all.filter(({ name }) => positionals.includes(name));
    return { ...values, banks };
  } catch (error) {
    return { problem: error instanceof Error ? error.message : String(error) };
  }
}

/**
 * As many banks at a time as there are processors: the simulator is a process of its own. A bank that cannot be traced or
 * whose deck the simulator gives up is a failure with its name, and the others go on.
 */
async function simulateAll(banks: readonly OracleBank[]): Promise<{ results: OracleResult[]; failures: string[] }> {
  const outcomes: (OracleResult | string)[] = [];
  let next = 0;
  const take = async (): Promise<void> => {
    while (next < banks.length) {
      const index = next++;
      const { name, simulate } = banks[index];
      outcomes[index] = await simulate().catch((error) => `${name}: ${error instanceof Error ? error.message : error}`);
      process.stderr.write(`${name} done\n`);
    }
  };
  await Promise.all(Array.from({ length: availableParallelism() }, take));
  return {
    results: outcomes.filter((outcome) => typeof outcome !== 'string'),
    failures: outcomes.filter((outcome) => typeof outcome === 'string'),
  };
}
