import { BOTH_WAYS, DISCHARGE_ONLY } from '../bank/bank-state.js';
import { loadIsServed } from '../bank/bus.js';
import { deviceCurrentA, differenceV } from '../bank/equaliser.js';
import { chainConductanceS, FORWARD, LEAKING } from '../bank/network.js';
import { chargePathOpen, dischargePathOpen, moduleMode } from '../bank/paths.js';
import { REFERENCE_K } from '../bank/temperature.js';
import type { Journey } from './advance.js';
import { cellVoltageV } from './kernel.js';
import { evaluateWithin } from './step.js';

/** A bank at one instant. */
export interface BankSample {
  readonly timeS: number;
  readonly busV: number;
  /** Net current into the bank. */
  readonly bankA: number;
  /** Power asked for and served at the bus, W; constant-current demand at the present bus voltage. */
  readonly demandW: number;
  readonly servedW: number;
  /** String by string from the negative end; one pack per string for native wiring. */
  readonly modules: readonly ModuleSample[];
}

export interface ModuleSample {
  readonly string: number;
  readonly position: number;
  readonly currentA: number;
  readonly terminalV: number;
  readonly charge: readonly number[];
  readonly cellV: readonly number[];
  readonly bleeding: readonly boolean[];
  readonly chargeOpen: boolean;
  readonly dischargeOpen: boolean;
  readonly temperatureK: number;
  /**
   * Current that the equaliser between this module and the next takes, A: from the next one if positive, from this one if
   * negative. Null without one.
   */
  readonly deviceA: number | null;
}

/** Takes samples of a journey at even intervals, from its present on. */
export interface Sampler {
  readonly everyS: number;
  nextS: number;
  readonly onSample: (sample: BankSample) => void;
}

/**
 * Samples the step about to be committed at every instant of the grid inside it. An instant at which something switches
 * is sampled as it was just before.
 */
export function sampleStep(sampler: Sampler, journey: Journey, stepS: number): void {
  const { kernel, work } = journey;
  const fromS = kernel.nowS;
  // A microsecond of slack takes instants in that rounding has put beyond the end of the step.
  if (sampler.nextS > fromS + stepS + 1e-6) return;
  while (sampler.nextS <= fromS + stepS + 1e-6) {
    const theta = Math.min(1, Math.max(1e-12, (sampler.nextS - fromS) / stepS));
    evaluateWithin(kernel, work, theta);
    sampler.onSample(sampleNow(journey, sampler.nextS, theta * stepS));
    sampler.nextS += sampler.everyS;
  }
  // The step itself must find the end of the step evaluated.
  evaluateWithin(kernel, work, 1);
}

/** The bank at the latest evaluation, `elapsedS` into the step that is not committed yet. */
function sampleNow(journey: Journey, timeS: number, elapsedS: number): BankSample {
  const { kernel, work, terminal } = journey;
  const { bank, state, point, chargePerAs, chargePerS, chainOfCell, bus } = kernel;
  const modules: ModuleSample[] = [];
  const stackV = new Float64Array(bank.modules);
  for (let m = 0; m < bank.modules; m++) {
    const cells = Array.from({ length: bank.cellStart[m + 1] - bank.cellStart[m] }, (_, k) => bank.cellStart[m] + k);
    const cellV = cells.map((c) => cellVoltageV(kernel, c, point.currentA, work.filterA));
    const currentA = point.currentA[bank.chainOfModule[m]];
    stackV[m] = cellV.reduce((sum, volts) => sum + volts, 0) + bank.pathOhm[m] * currentA;
    modules.push({
      string: Math.floor(m / bank.positions) + 1,
      position: (m % bank.positions) + 1,
      currentA,
      terminalV: 0,
      charge: cells.map(
        (c) => state.charge[c] + chargePerAs[c] * work.passedAs[chainOfCell[c]] + chargePerS[c] * elapsedS,
      ),
      cellV,
      bleeding: cells.map((c) => state.bleeding[c] === 1),
      chargeOpen: chargePathOpen(bank, state, m),
      dischargeOpen: dischargePathOpen(bank, state, m),
      temperatureK: (journey.climate?.ambientK ?? REFERENCE_K) + bank.temperature.offsetK[m],
      deviceA: deviceAbove(journey, m),
    });
  }
  const demandW = terminal.demandW + terminal.demandA * point.bankV;
  const served = terminal.loadConnected && loadIsServed(bus.regime);
  return {
    timeS,
    busV: point.bankV,
    bankA: point.bankA,
    demandW,
    servedW: served ? demandW : 0,
    modules: modules.map((module, m) => ({ ...module, terminalV: stackV[m] + pathVoltageV(journey, stackV, m) })),
  };
}

function deviceAbove({ kernel }: Journey, m: number): number | null {
  const { bank, state, point } = kernel;
  const k = bank.equaliser?.lower.indexOf(m) ?? -1;
  if (bank.equaliser === null || k < 0) return null;
  const atV = differenceV(bank.equaliser, point.emfV, point.currentA, k);
  return deviceCurrentA(bank.equaliser, state.equaliserRegion[k], atV);
}

/** Voltage across the open path of module `m` beside its resistance: its drop if it conducts, all that is left if not. */
function pathVoltageV(journey: Journey, stackV: Float64Array, m: number): number {
  const { bank, state, point } = journey.kernel;
  const mode = moduleMode(bank, state, m);
  if (mode === BOTH_WAYS) return 0;
  const i = bank.chainOfModule[m];
  if (state.conduction[i] === FORWARD) {
    if (state.reclosed[m] === 1) return 0;
    return mode === DISCHARGE_ONLY ? -bank.forwardDropV[m] : bank.forwardDropV[m];
  }
  const chain = bank.wiring.chains[i];
  const currentA = point.currentA[i];
  const chainV = point.effectiveV[i] + currentA / chainConductanceS(LEAKING, bank.chainOhm[i]);
  const restV = chain.modules.reduce((rest, other) => rest - stackV[other], chainV - chain.ohm * currentA);
  return restV / chain.modules.filter((other) => moduleMode(bank, state, other) !== BOTH_WAYS).length;
}
