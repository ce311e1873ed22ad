import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { chainWiring } from '../../src/bank/chains.js';
import { linkCurrentPerChain } from '../../src/bank/link-currents.js';
import { CLOSED, solveNetwork } from '../../src/bank/network.js';
import { type WiringGraph, wireCandidate } from '../../src/bank/wiring-graph.js';
import type { Candidate } from '../../src/study/study.js';
import { solveNodes } from './nodal-solve.js';
import { wired } from './random-wiring.js';

/** A bank of bare modules on rails; resistances in Ohm, modules [string][position]. */
function graphOnRails(
  moduleOhm: readonly (readonly number[])[],
  segmentOhm: readonly number[],
  kind: 'same-end' | 'diagonal' | null,
  terms: { wiring?: Candidate['wiring']; leadOhm?: number; linkOhm?: number } = {},
): WiringGraph {
  const { wiring = 'strings', leadOhm = 0, linkOhm = 0.001 } = terms;
  const { candidate } = wired({ wiring, moduleOhm, leadOhm, linkOhm });
  return wireCandidate(kind === null ? candidate : { ...candidate, takeOff: { kind, segmentOhm } });
}

/** Module currents of a graph for a current into the bus and given EMFs, by the engine's reduction. */
function currentsOf(
  graph: WiringGraph,
  moduleOhm: readonly number[],
  emfV: readonly number[],
  bankA: number,
): number[] {
  const wiring = chainWiring(graph);
  const count = wiring.chains.length;
  const chainOhm = Float64Array.from(wiring.chains, ({ modules, ohm }) =>
    modules.reduce((sum, m) => sum + moduleOhm[m], ohm),
  );
  const map = solveNetwork(wiring, chainOhm, new Uint8Array(count).fill(CLOSED));
  const chainV = wiring.chains.map(({ modules }) => modules.reduce((sum, m) => sum + emfV[m], 0));
  const moduleA = new Array<number>(moduleOhm.length).fill(0);
  wiring.chains.forEach(({ modules }, i) => {
    const own = chainV.reduce(
      (sum, volts, j) => sum + map.currentPerEmf[i * count + j] * volts,
      map.currentPerBank[i] * bankA,
    );
    for (const m of modules) moduleA[m] = own;
  });
  return moduleA;
}

/** Currents of N equal batteries of R mOhm with segments of r mOhm in both rails, 100 A. */
function ladder(n: number, rMOhm: number, segmentMOhm: number, kind: 'same-end' | 'diagonal' | null): number[] {
  const ohm = rMOhm / 1000;
  const modules = Array.from({ length: n }, () => [ohm]);
  const segments = new Array<number>(n - 1).fill(segmentMOhm / 1000);
  return currentsOf(graphOnRails(modules, segments, kind), modules.flat(), new Array<number>(n).fill(0), 100);
}

const mirrored = (half: readonly number[]): number[] => [...half, ...[...half].reverse()];

describe('equal batteries on two rails, 100 A', () => {
  // Derived by hand from Kirchhoff's laws and verified by a second route; the first row follows a published worked example.
  it.each([
    [4, 20, 1.5, [35.752766, 26.11568, 20.395947, 17.735606], mirrored([26.744186, 23.255814])],
    [2, 10, 1, [54.545455, 45.454545], [50, 50]],
    [4, 10, 0.5, [32.622011, 25.884213, 21.734835, 19.758941], mirrored([26.190476, 23.809524])],
    [
      8,
      10,
      0.5,
      [27.43335, 20.176685, 14.937689, 11.192461, 8.56648, 6.797146, 5.707527, 5.188661],
      mirrored([16.311006, 12.942106, 10.867418, 9.87947]),
    ],
  ])('%d of %d mOhm with segments of %d mOhm share as published', (n, r, segment, sameEnd, diagonal) => {
    ladder(n, r, segment, 'same-end').forEach((amperes, s) => {
      expect(amperes).toBeCloseTo(sameEnd[s], 5);
    });
    ladder(n, r, segment, 'diagonal').forEach((amperes, s) => {
      expect(amperes).toBeCloseTo(diagonal[s], 5);
    });
  });

  const resistance = fc.double({ min: 0.1, max: 100, noNaN: true });
  const property = (check: (r: number, segment: number) => void): void => {
    fc.assert(fc.property(resistance, resistance, check), { seed: 2026, numRuns: 50 });
  };

  it('share by the laws derived by hand: (R + 2 r) / R, R / (R + r), and half as many at one end', () => {
    property((r, segment) => {
      const [near, far] = ladder(2, r, segment, 'same-end');
      expect(near / far).toBeCloseTo((r + 2 * segment) / r, 8);
      const [outer, middle] = ladder(3, r, segment, 'diagonal');
      expect(middle / outer).toBeCloseTo(r / (r + segment), 8);
      for (const n of [4, 6, 8]) {
        const most = Math.max(...ladder(n, r, segment, 'diagonal')) / (100 / n);
        const ofHalf = Math.max(...ladder(n / 2, r, segment, 'same-end')) / (100 / (n / 2));
        expect(most).toBeCloseTo(ofHalf, 8);
      }
    });
  });

  it('share exactly equally in a star of equal leads', () => {
    property((r) => {
      const shares = ladder(8, r, 1, null);
      for (const own of shares) expect(own).toBe(shares[0]);
    });
  });
});

describe('two strings of two, 10 over 12 mOhm and 12 over 10, 100 A', () => {
  // By hand: as for the sharing in network.test.ts; the link carries what one string has more above than below.
  it.each([
    [0, 9.090909],
    [1, 8.333333],
    [10, 4.761905],
    [100, 0.900901],
  ])('have in a link of %d mOhm %d A', (linkMOhm, amperes) => {
    const moduleOhm = [
      [0.01, 0.012],
      [0.012, 0.01],
    ];
    const graph = graphOnRails(moduleOhm, [], null, {
      wiring: 'cross-linked',
      linkOhm: Math.max(1e-9, linkMOhm / 1000),
    });
    const wiring = chainWiring(graph);
    const moduleA = currentsOf(graph, moduleOhm.flat(), [0, 0, 0, 0], 100);
    const perChain = linkCurrentPerChain(wiring);
    const linkA = wiring.chains.reduce((sum, { modules }, i) => sum + perChain[i] * moduleA[modules[0]], 0);
    expect(Math.abs(linkA)).toBeCloseTo(amperes, 5);
  });
});

describe('any bank on rails', () => {
  it('has the currents of modules and links of an independent nodal solve', () => {
    const ohm = (low: number, high: number): fc.Arbitrary<number> =>
      fc.double({ min: Math.log(low), max: Math.log(high), noNaN: true }).map(Math.exp);
    const bank = fc
      .record({ positions: fc.integer({ min: 1, max: 4 }), strings: fc.integer({ min: 2, max: 8 }) })
      .chain(({ positions, strings }) =>
        fc.record({
          moduleOhm: fc.array(fc.array(ohm(0.003, 0.03), { minLength: positions, maxLength: positions }), {
            minLength: strings,
            maxLength: strings,
          }),
          segmentOhm: fc.array(ohm(1e-5, 0.01), { minLength: strings - 1, maxLength: strings - 1 }),
          emfV: fc.array(fc.double({ min: 12, max: 14, noNaN: true }), {
            minLength: strings * positions,
            maxLength: strings * positions,
          }),
          kind: fc.constantFrom('same-end' as const, 'diagonal' as const),
          wiring: fc.constantFrom('strings' as const, 'cross-linked' as const),
          linkOhm: ohm(1e-5, 0.1),
        }),
      );
    fc.assert(
      fc.property(bank, ({ moduleOhm, segmentOhm, emfV, kind, wiring, linkOhm }) => {
        const graph = graphOnRails(moduleOhm, segmentOhm, kind, { wiring, leadOhm: 0.0005, linkOhm });
        const own = currentsOf(graph, moduleOhm.flat(), emfV, -80);
        const modules = moduleOhm.flat().map((r, m) => ({ emfV: emfV[m], conductanceS: 1 / r }));
        const nodal = solveNodes(graph, modules, { bankA: -80 });
        own.forEach((amperes, m) => {
          expect(amperes).toBeCloseTo(nodal.moduleA[m], 6);
        });
        const chained = chainWiring(graph);
        const perChain = linkCurrentPerChain(chained);
        const chainA = chained.chains.map(({ modules: [first] }) => own[first]);
        graph.branches
          .filter((branch) => branch.kind === 'link')
          .forEach((link, index) => {
            if (link.kind === 'module') return;
            const nodalA = Math.abs(nodal.nodeV[link.from] - nodal.nodeV[link.to]) / link.ohm;
            const amperes = chainA.reduce((sum, a, i) => sum + perChain[index * chainA.length + i] * a, 0);
            expect(Math.abs(amperes)).toBeCloseTo(nodalA, 4);
          });
      }),
      { seed: 20261201, numRuns: 100 },
    );
  });
});
