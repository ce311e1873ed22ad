import { describe, expect, it } from 'vitest';
import type { Bank } from '../../src/bank/bank.js';
import { summariseMoments } from '../../src/statistics/moments.js';
import { studyOf } from '../study/study-under-test.js';
import { traceBank } from './run-study.js';

const BANKS = 300;
const SIGMA_AH = 5;
const LOAD_A = 4;
/** What resistance and the end of the curve may cost in all, Ah. */
const BIAS_AH = 0.1;
const LINKS_MOHM = [0.1, 1, 10, 100, 1000, 10_000];

const wired = (wiring: string, more = '') => `{wiring: ${wiring}, modules: [[A1, A2], [B1, B2]]${more}}`;

/** Full modules of unlike capacity and nothing else unlike or lossy, emptied at C/50 until the load is lost. */
const STUDY = studyOf(`motleybank: 1
seed: 8
instances: ${BANKS}
cycles: 1
stock:
  house:
    rated_Ah: 100
    modules: [A1, A2, B1, B2]
    capacity_Ah: {nominal: 100, module_sd: ${SIGMA_AH}, cell: {law: fixed}}
    correlation: []
    cell_resistance_mOhm: 0.8
    path_resistance_mOhm: 1.5
    joint_resistance_mOhm: 1.3
    leakage_percent_per_month: 0
    standby_mA: 0
    coulombic_efficiency: 1
    hysteresis_mV: 0
    arrival_charge_percent: 100
    bms: {over_voltage: {cell_V: 3.7}, under_voltage: {cell_V: 2.5}, bleed: {rule: none}, asleep_mA: 0}
bank: {load: {disconnect_V: null}}
duty: {phases: [{discharge_A: ${LOAD_A}, for_h: 70}]}
candidates:
  strings: ${wired('strings')}
${LINKS_MOHM.map((mOhm, at) => `  link-${at}: ${wired('cross-linked', `, link_mOhm: ${mOhm}`)}`).join('\n')}
`);

interface Emptied {
  readonly usableAh: number;
  /** Capacities of A1, A2, B1, B2. */
  readonly capacityAh: readonly number[];
}

function emptied(candidate: string, instance: number): Emptied {
  const { bank, events } = traceBank(STUDY, { candidate, instance, everyS: 1e9 });
  const lost = events.find(({ kind }) => kind === 'load-lost');
  if (lost === undefined) throw new RangeError(`${candidate} ${instance} never lost its load`);
  return { usableAh: (LOAD_A * lost.timeS) / 3600, capacityAh: capacitiesAh(bank) };
}

function capacitiesAh({ capacityAs, cellStart }: Bank): number[] {
  return [0, 1, 2, 3].map((m) => (capacityAs[cellStart[m] ?? 0] ?? Number.NaN) / 3600);
}

const idealAh = ([a1 = 0, a2 = 0, b1 = 0, b2 = 0]: readonly number[]) => (a1 + a2 + b1 + b2) / 2;
/** Closed forms: strings carry their smaller module each, a tied bank its smaller position. */
const stringsAh = ([a1 = 0, a2 = 0, b1 = 0, b2 = 0]: readonly number[]) => Math.min(a1, a2) + Math.min(b1, b2);
const linkedAh = ([a1 = 0, a2 = 0, b1 = 0, b2 = 0]: readonly number[]) => Math.min(a1 + b1, a2 + b2);

describe('capacity lost by unlike modules of a 2S2P bank, CoV 5 %, at C/50', () => {
  const instances = Array.from({ length: BANKS }, (_, i) => i + 1);
  const strings = instances.map((instance) => emptied('strings', instance));
  const linked = instances.map((instance) => emptied('link-1', instance));

  it('is in every bank what its capacities alone say', () => {
    for (const { usableAh, capacityAh } of strings) {
      expect(Math.abs(stringsAh(capacityAh) - usableAh)).toBeLessThan(BIAS_AH);
    }
    for (const { usableAh, capacityAh } of linked) {
      expect(Math.abs(linkedAh(capacityAh) - usableAh)).toBeLessThan(BIAS_AH);
    }
  });

  it.each([
    ['strings', strings, 2 * 0.5641895835],
    ['cross-linked', linked, Math.SQRT2 * 0.5641895835],
  ] as const)('has the mean and spread of normal order statistics, %s', (_, banks, expected) => {
    // n e_m sigma and sqrt(n) e_m sigma with e_2 = 0.56419 (Tippett, Biometrika 17 (1925) 364): 1.1284 and 0.7979
    // sigma. Its spread is 0.603 sigma in both: strings lose |a1 - a2| / 2 + |b1 - b2| / 2, each with sd
    // sqrt(1 - 2/pi) sigma / sqrt(2); tied positions lose half a difference of sums, sd sqrt(1 - 2/pi) sigma.
    // Band: three standard errors, and the bias.
    const lossAh = Float64Array.from(banks, ({ usableAh, capacityAh }) => idealAh(capacityAh) - usableAh);
    const { mean, variance } = summariseMoments(lossAh);
    const errorAh = (0.603 * SIGMA_AH) / Math.sqrt(BANKS);
    expect(Math.abs(mean - expected * SIGMA_AH)).toBeLessThan(3 * errorAh + BIAS_AH);
    // Kurtosis of a half normal law 3.87, so the standard error of a variance is sqrt(2.87 / n) of it.
    expect(Math.abs(variance / (0.603 * SIGMA_AH) ** 2 - 1)).toBeLessThan(3 * Math.sqrt(2.87 / BANKS));
  });

  it('is never larger with linked positions than in strings', () => {
    // Law of the closed forms, bank by bank; a hundredth of an Ah for the resistances.
    linked.forEach(({ usableAh }, i) => {
      expect(usableAh).toBeGreaterThan((strings[i]?.usableAh ?? Number.NaN) - 0.01);
    });
  });

  it('moves steadily to that of strings as the links grow from 0.1 mOhm to 1 Ohm', () => {
    // Law: less tied is closer to not tied. The four banks that gain most by links tell it best.
    const gainAh = (i: number) => (linked[i]?.usableAh ?? 0) - (strings[i]?.usableAh ?? 0);
    const best = instances.toSorted((a, b) => gainAh(b - 1) - gainAh(a - 1)).slice(0, 4);
    for (const instance of best) {
      const usableAh = LINKS_MOHM.map((_, at) => emptied(`link-${at}`, instance).usableAh);
      usableAh.push(strings[instance - 1]?.usableAh ?? Number.NaN);
      usableAh.forEach((ah, at) => {
        if (at > 0) expect(ah).toBeLessThan((usableAh[at - 1] ?? Number.NaN) + 0.01);
      });
    }
  });
});
