import type { Bank } from '../bank/bank.js';
import type { BankState } from '../bank/bank-state.js';
import { type Joining, joiningOf } from '../bank/joining.js';
import { linkCurrentPerChain } from '../bank/link-currents.js';
import { LEAK_S, LEAKING } from '../bank/network.js';
import type { SharingFacts } from '../measures/sharing.js';
import type { BankRatings, ModuleRatings } from '../study/study.js';
import type { Journey } from './advance.js';

/** Bank current up to which the bank counts as at rest, as a fraction of its rated capacity per hour (own choice). */
const REST_RATE = 0.01;

// Places of sums over time; those of chains and links follow.
const ELAPSED_S = 0;
const BANK_A2S = 1;
const CIRCULATING_AS = 2;
const ABOVE_S = 3;
const SINGLES = 4;

/** Watches how the chains of a bank share its current: peaks, and sums over time. */
export interface SharingRecorder {
  readonly bank: Bank;
  /** Modules of a chain over positions: with these weights chain currents add up to the bank current. */
  readonly weight: Float64Array;
  readonly linkPerChain: Float64Array;
  readonly links: number;
  readonly restA: number;
  /** Least continuous rating of the modules of a chain, infinite if none is stated. */
  readonly continuousA: Float64Array;
  readonly joining: Joining | null;
  readonly peakA: Float64Array;
  readonly peakLinkA: Float64Array;
  /** Largest voltage across the open paths of each chain, V. */
  readonly blockingV: Float64Array;
  /** Singles as above; then of each chain its current squared over time, A2s, and its throughput, As; of each link squares. */
  readonly sums: Float64Array;
  readonly atBurst: Float64Array;
  peakBankA: number;
}

/** @param ratings of every module of the bank */
export function createSharingRecorder(
  bank: Bank,
  state: BankState,
  ratings: readonly (ModuleRatings | null)[],
): SharingRecorder {
  const { chains } = bank.wiring;
  const count = chains.length;
  const linkPerChain = linkCurrentPerChain(bank.wiring);
  const links = linkPerChain.length / count;
  const sums = new Float64Array(SINGLES + 2 * count + links);
  return {
    bank,
    weight: Float64Array.from(chains, ({ modules }) => modules.length / bank.positions),
    linkPerChain,
    links,
    restA: REST_RATE * bank.ratedAh,
    continuousA: Float64Array.from(chains, ({ modules }) => leastOf(modules, ratings, 'continuousA')),
    joining: joiningOf(bank, state),
    peakA: new Float64Array(count),
    peakLinkA: new Float64Array(links),
    blockingV: new Float64Array(count),
    sums,
    atBurst: new Float64Array(sums.length),
    peakBankA: 0,
  };
}

/**
 * Takes a step before it is committed. Within it a current runs from a at its start to b at its end:
 *
 *   peak = max(|a|, |b|),   integral of I^2 = (a^2 + a b + b^2) / 3 dt   (for a straight line)
 *
 * Charge moved between strings is what their currents exceed that of the bank by, mean over the positions:
 *
 *   q = (sum_i w_i |q_i| - |sum_i w_i q_i|) / 2
 */
export function recordSharing(recorder: SharingRecorder, journey: Journey, stepS: number): void {
  const { bus } = journey.kernel;
  const { endBankA } = journey.work;
  const { sums } = recorder;
  const [startA, endA] = [Math.abs(bus.bankA), Math.abs(endBankA)];
  recorder.peakBankA = Math.max(recorder.peakBankA, startA, endA);
  sums[ELAPSED_S] += stepS;
  sums[BANK_A2S] += ((bus.bankA * bus.bankA + bus.bankA * endBankA + endBankA * endBankA) * stepS) / 3;
  recordChains(recorder, journey, stepS);
  recordOpenPaths(recorder, journey);
  if (startA <= recorder.restA && endA <= recorder.restA) recordCirculation(recorder, journey);
  if (recorder.links > 0) recordLinks(recorder, journey, stepS);
}

function recordChains({ peakA, sums, continuousA }: SharingRecorder, { work }: Journey, stepS: number): void {
  const { firstA, lastA, endAs } = work;
  const chains = firstA.length;
  let above = 0;
  for (let i = 0; i < chains; i++) {
    const a = firstA[i];
    const b = lastA[i];
    const larger = Math.max(Math.abs(a), Math.abs(b));
    if (larger > peakA[i]) peakA[i] = larger;
    sums[SINGLES + i] += ((a * a + a * b + b * b) * stepS) / 3;
    sums[SINGLES + chains + i] += Math.abs(endAs[i]);
    if (larger > continuousA[i])
      above = Math.max(above, shareAbove(continuousA[i], Math.min(Math.abs(a), Math.abs(b)), larger));
  }
  sums[ABOVE_S] += above * stepS;
}

/** Share of a step in which a magnitude that runs straight from one value to the other is above a limit it passes. */
function shareAbove(limit: number, smaller: number, larger: number): number {
  return smaller >= limit ? 1 : (larger - limit) / (larger - smaller);
}

/** Across a path that leaks stands the voltage that drives its leak. */
function recordOpenPaths({ blockingV }: SharingRecorder, { kernel, work }: Journey): void {
  const { conduction } = kernel.state;
  for (let i = 0; i < conduction.length; i++) {
    if (conduction[i] !== LEAKING) continue;
    const volts = Math.max(Math.abs(work.firstA[i]), Math.abs(work.lastA[i])) / LEAK_S;
    if (volts > blockingV[i]) blockingV[i] = volts;
  }
}

function recordCirculation({ weight, sums }: SharingRecorder, { work }: Journey): void {
  const { endAs } = work;
  let both = 0;
  let net = 0;
  for (let i = 0; i < weight.length; i++) {
    both += weight[i] * Math.abs(endAs[i]);
    net += weight[i] * endAs[i];
  }
  sums[CIRCULATING_AS] += (both - Math.abs(net)) / 2;
}

function recordLinks(
  { links, linkPerChain, peakLinkA, sums }: SharingRecorder,
  { work }: Journey,
  stepS: number,
): void {
  const { firstA, lastA } = work;
  const chains = firstA.length;
  for (let link = 0, at = 0; link < links; link++) {
    let a = 0;
    let b = 0;
    for (let i = 0; i < chains; i++, at++) {
      a += linkPerChain[at] * firstA[i];
      b += linkPerChain[at] * lastA[i];
    }
    const larger = Math.max(Math.abs(a), Math.abs(b));
    if (larger > peakLinkA[link]) peakLinkA[link] = larger;
    sums[SINGLES + 2 * chains + link] += ((a * a + a * b + b * b) * stepS) / 3;
  }
}

/** A burst of switching begins: remembers the sums, so that a leap can add to them in proportion. */
export function beginBurstSharing({ sums, atBurst }: SharingRecorder): void {
  atBurst.set(sums);
}

/** Adds `ratio` times what the burst has summed up. */
export function recordSharingLeap({ sums, atBurst }: SharingRecorder, ratio: number): void {
  for (let at = 0; at < sums.length; at++) sums[at] += ratio * (sums[at] - atBurst[at]);
}

/** What the measures are made from. */
export function sharingFacts(
  recorder: SharingRecorder,
  ratings: readonly (ModuleRatings | null)[],
  ofBank: BankRatings | null,
): SharingFacts {
  const { bank, sums, peakA, blockingV, links, joining } = recorder;
  const { chains } = bank.wiring;
  const count = chains.length;
  const elapsedS = sums[ELAPSED_S];
  const rms = (squares: number): number => (elapsedS > 0 ? Math.sqrt(squares / elapsedS) : 0);
  const throughputAs = new Float64Array(bank.strings);
  let mostSquares = 0;
  chains.forEach(({ modules }, i) => {
    throughputAs[Math.floor(modules[0] / bank.positions)] += recorder.weight[i] * sums[SINGLES + count + i];
    mostSquares = Math.max(mostSquares, sums[SINGLES + i]);
  });
  const largestBlockingV = Math.max(...blockingV);
  const hasOpened = largestBlockingV > 0;
  const states = (key: keyof ModuleRatings): boolean => ratings.some((rating) => (rating?.[key] ?? null) !== null);
  const ofRating = (values: Float64Array, key: keyof ModuleRatings): number =>
    chains.reduce((worst, { modules }, i) => Math.max(worst, values[i] / leastOf(modules, ratings, key)), 0);
  return {
    strings: bank.strings,
    elapsedS,
    peakBankA: recorder.peakBankA,
    rmsBankA: rms(sums[BANK_A2S]),
    peakModuleA: Math.max(...peakA),
    rmsModuleA: rms(mostSquares),
    peakOfRating: states('peakA') ? ofRating(peakA, 'peakA') : null,
    aboveContinuousS: states('continuousA') ? sums[ABOVE_S] : null,
    peakLinkA: links > 0 ? Math.max(...recorder.peakLinkA) : null,
    rmsLinkA: links > 0 ? rms(Math.max(...sums.subarray(SINGLES + 2 * count))) : null,
    joiningV: joining?.differenceV ?? null,
    joiningA: joining?.currentA ?? null,
    circulatingAs: bank.strings > 1 ? sums[CIRCULATING_AS] : null,
    mostThroughputAs: Math.max(...throughputAs),
    leastThroughputAs: Math.min(...throughputAs),
    blockingV: hasOpened ? largestBlockingV : null,
    blockingOfRating: hasOpened && states('blockingV') ? ofRating(blockingV, 'blockingV') : null,
    leadRatingA: ofBank?.leadA ?? null,
    fuseRatingA: ofBank?.fuseA ?? null,
    linkRatingA: ofBank?.linkA ?? null,
  };
}

/** Least rating of a kind among modules in series, infinite if none is stated. */
function leastOf(
  modules: readonly number[],
  ratings: readonly (ModuleRatings | null)[],
  key: keyof ModuleRatings,
): number {
  return modules.reduce(
    (least, m) => Math.min(least, ratings[m]?.[key] ?? Number.POSITIVE_INFINITY),
    Number.POSITIVE_INFINITY,
  );
}
