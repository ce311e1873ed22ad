import { describe, expect, it } from 'vitest';
import { chainWiring } from '../../src/bank/chains.js';
import type { WiringBranch, WiringGraph } from '../../src/bank/wiring-graph.js';
import { wired, wirings } from './random-wiring.js';

const sketch = ({ wiring, positions, strings }: (typeof wirings)[number]) => ({
  wiring,
  moduleOhm: Array.from({ length: strings }, () => new Array<number>(positions).fill(0.01)),
});

describe('wireCandidate', () => {
  it('counts modules, leads and links as the wiring says', () => {
    for (const shape of wirings) {
      const { graph } = wired(sketch(shape));
      const { strings } = shape;
      const positions = shape.wiring === 'native' ? 1 : shape.positions;
      const count = (kind: WiringBranch['kind']): number =>
        graph.branches.filter((branch) => branch.kind === kind).length;
      expect(count('module')).toBe(strings * positions);
      expect(count('lead')).toBe(strings * (positions + 1));
      expect(count('link')).toBe(shape.wiring === 'cross-linked' ? (strings - 1) * (positions - 1) : 0);
      // Two posts for every module beside the two of the bus.
      expect(graph.nodes).toBe(2 + 2 * strings * positions);
    }
  });

  it('ties positive posts of equal position, the lead between modules above the tap', () => {
    const { graph } = wired({ ...sketch({ wiring: 'cross-linked', positions: 2, strings: 2 }), linkOhm: 0.5 });
    const link = graph.branches.find(({ kind }) => kind === 'link');
    const positivePost = (module: number): number | undefined =>
      graph.branches.find((branch) => branch.kind === 'module' && branch.module === module)?.to;
    expect(link).toMatchObject({ ohm: 0.5, from: positivePost(0), to: positivePost(2) });
  });
});

describe('chainWiring', () => {
  it('makes one chain of each string, or of each module where taps are tied', () => {
    for (const shape of wirings) {
      const { bank } = wired(sketch(shape));
      const { chains, links } = bank.wiring;
      const { strings, positions } = shape;
      const split = shape.wiring === 'cross-linked' && strings > 1;
      expect(chains.length).toBe(split ? strings * positions : strings);
      expect(links.length).toBe(split ? (strings - 1) * (positions - 1) : 0);
      const numbers = chains.flatMap(({ modules }) => modules);
      expect(numbers).toEqual(numbers.map((_, m) => m));
    }
  });

  it('adds the leads along a chain', () => {
    const strings = wired({ wiring: 'strings', moduleOhm: [[0.01, 0.01, 0.01]], leadOhm: 0.002 });
    expect(strings.bank.wiring.chains[0].ohm).toBeCloseTo(0.008, 15);
    const native = wired({ wiring: 'native', moduleOhm: [[0.01, 0.01, 0.01]], leadOhm: 0.002 });
    expect(native.bank.wiring.chains[0].ohm).toBeCloseTo(0.004, 15);
    const linked = wired({ ...sketch({ wiring: 'cross-linked', positions: 3, strings: 2 }), leadOhm: 0.002 });
    expect(linked.bank.wiring.chains.map(({ ohm }) => ohm)).toEqual([0.002, 0.002, 0.004, 0.002, 0.002, 0.004]);
  });

  it('walks a path from either end', () => {
    // A string whose branches run from plus to minus in the list, modules still from negative to positive.
    const branches: WiringBranch[] = [
      { kind: 'lead', ohm: 1, from: 1, to: 3 },
      { kind: 'module', module: 0, from: 2, to: 3 },
      { kind: 'lead', ohm: 2, from: 2, to: 0 },
    ];
    expect(chainWiring({ nodes: 4, branches }).chains).toEqual([{ from: 0, to: 1, modules: [0], ohm: 3 }]);
  });

  it('refuses modules that oppose each other on one path, and loose ends', () => {
    const opposed: WiringGraph = {
      nodes: 3,
      branches: [
        { kind: 'module', module: 0, from: 0, to: 2 },
        { kind: 'module', module: 1, from: 1, to: 2 },
      ],
    };
    expect(() => chainWiring(opposed)).toThrow('modules 0 and 1 must point the same way along their path');
    const loose: WiringGraph = { nodes: 3, branches: [{ kind: 'module', module: 0, from: 0, to: 2 }] };
    expect(() => chainWiring(loose)).toThrow('wiring node 2 must be connected on both sides');
  });
});
