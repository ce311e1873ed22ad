import { conductorOhm } from './conductor.js';
import { endsOf, type NetworkInput } from './custom-wiring.js';
import { didYouMean } from './nearest-name.js';
import { faultyPlaces, levelsOf } from './network-rules.js';
import type { Reading } from './reading.js';
import type { CustomBranch, CustomNetwork } from './study.js';
import type { StudyPath } from './study-path.js';

/** Least resistance of a conductor between two nodes, Ohm: without any, its current would not be determined. */
const LEAST_OHM = 1e-7;

/**
 * The network of a custom wiring, checked: names known, every module of the candidate used once, everything connected,
 * no module shorted.
 *
 * Strings and positions are the writer's: `modules` of the candidate groups the modules as for every wiring. It must be
 * true to the network in two ways, without which measures along a string would have no meaning: the module at position
 * k has k - 1 modules between its minus and bus minus, on every way; and modules that always carry one current stand in
 * one string.
 *
 * @returns undefined after recording what is wrong
 */
export function resolveNetwork(
  candidatePath: StudyPath,
  input: NetworkInput,
  strings: readonly (readonly string[])[],
  reading: Reading,
): CustomNetwork | undefined {
  const path = [...candidatePath, 'network'];
  const before = reading.problems.length;
  const numbers = numberNodes(path, input, reading);
  const positions = strings[0]?.length ?? 0;
  const modules = new Map(strings.flat().map((id, index) => [id, index]));
  const used = new Set<string>();
  const branches: { branch: CustomBranch; path: StudyPath }[] = [];
  for (const [index, written] of input.branches.entries()) {
    const at = [...path, 'branches', index];
    const [fromKey, toKey] = written.module !== undefined ? (['minus', 'plus'] as const) : (['from', 'to'] as const);
    const [fromName, toName] = endsOf(written);
    const from = nodeNumber(numbers, fromName, [...at, fromKey], reading);
    const to = nodeNumber(numbers, toName, [...at, toKey], reading);
    if (fromName === toName) reading.fault([...at, toKey], `another node than ${fromKey}`);
    if (written.module !== undefined) {
      const module = modules.get(written.module);
      if (module === undefined) {
        reading.fault(
          [...at, 'module'],
          "one of the candidate's modules",
          didYouMean(written.module, [...modules.keys()]),
        );
      } else if (used.has(written.module)) reading.fault([...at, 'module'], 'a module that stands in one branch only');
      used.add(written.module);
      branches.push({ path: at, branch: { kind: 'module', module: module ?? 0, from, to } });
    } else {
      const ohm = conductorOhm(written);
      if (!(ohm >= LEAST_OHM)) reading.faultWith(at, 'must be a conductor of at least 0.0001 mOhm, got less');
      branches.push({ path: at, branch: { kind: 'rail', ohm, from, to } });
    }
  }
  strings.forEach((string, s) => {
    string.forEach((id, p) => {
      if (!used.has(id))
        reading.fault([...candidatePath, 'modules', s, p], 'a module that stands in a branch of the network');
    });
  });
  if (reading.problems.length > before) return undefined;
  const network = { nodes: numbers.size, branches: branches.map(({ branch }) => branch) };
  const names = [...numbers.keys()];
  for (const { place, message } of faultyPlaces(network, positions)) {
    if (place.kind === 'node')
      reading.faultWith([...path, 'nodes', input.nodes.indexOf(names[place.index] ?? '')], message);
    else if (place.kind === 'branch') reading.faultWith(branches[place.index]?.path ?? path, message);
    else if (place.kind === 'bus-plus') reading.faultWith([...path, 'bus_plus'], message);
    else
      reading.faultWith(
        [...candidatePath, 'modules', Math.floor(place.index / positions), place.index % positions],
        message,
      );
  }
  if (reading.problems.length > before) return undefined;
  const level = levelsOf(network).level;
  return {
    ...network,
    branches: network.branches.map((branch) => {
      const isLink = branch.kind === 'rail' && (level[branch.from] ?? 0) > 0 && (level[branch.from] ?? 0) < positions;
      return isLink ? { ...branch, kind: 'link' } : branch;
    }),
  };
}

/** Node numbers by name: bus minus 0, bus plus 1, the others in the order of the list. */
function numberNodes(path: StudyPath, input: NetworkInput, reading: Reading): ReadonlyMap<string, number> {
  const listed = new Set<string>();
  for (const [index, name] of input.nodes.entries()) {
    if (listed.has(name)) reading.fault([...path, 'nodes', index], 'a node named once');
    listed.add(name);
  }
  for (const key of ['bus_minus', 'bus_plus'] as const) {
    if (!listed.has(input[key])) reading.fault([...path, key], 'one of the nodes', didYouMean(input[key], input.nodes));
  }
  if (input.bus_minus === input.bus_plus) reading.fault([...path, 'bus_plus'], 'another node than bus_minus');
  const numbers = new Map<string, number>();
  for (const name of [input.bus_minus, input.bus_plus, ...input.nodes]) {
    if (!numbers.has(name)) numbers.set(name, numbers.size);
  }
  return numbers;
}

function nodeNumber(numbers: ReadonlyMap<string, number>, name: string, path: StudyPath, reading: Reading): number {
  const number = numbers.get(name);
  if (number === undefined) reading.fault(path, 'one of the nodes', didYouMean(name, [...numbers.keys()]));
  return number ?? 0;
}
