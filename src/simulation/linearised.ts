import { BUS_DEAD, BUS_OVERLOADED, CHARGER_HOLDS } from '../bank/bus.js';
import { factorLu, solveLu } from '../mathematics/small-lu.js';
import type { Kernel } from './kernel.js';

/**
 * The bank linearised about the start of a step, with pattern and regime kept: chain currents follow small changes of
 * the EMFs by `currentPerEmf`, the EMFs follow charge and filtered currents by their slopes.
 *
 *   dI = M dE,   dE_i = E'_i dq_i + sum_k R_ki dF_ki,   dq_i/dt = I_i,   dF_ki/dt = (I_i - F_ki) / tau_k
 *
 * What an implicit step of length h has to solve, with a = gamma h, is the same bank at rest with each chain's
 * resistance made larger by what its EMF gives way over the step:
 *
 *   (1 - M D) dI = M w,   D_i = a E'_i + sum_k R_ki a / (a + tau_k)
 */
export interface Linearised {
  /** M, row by row, S. */
  readonly currentPerEmf: Float64Array;
  /** Change of the chain currents with time alone, A/s. */
  readonly currentPerS: Float64Array;
  /** 1 - M D, factored. */
  readonly factors: Float64Array;
  readonly drivenV: Float64Array;
  /** a E' of each chain, and a R_k of each filter over 1 + a / tau_k. */
  readonly gaveOhm: Float64Array;
  readonly filterGaveOhm: Float64Array;
  /** Of each time constant: a / (1 + a / tau), and 1 / tau. */
  readonly filterS: Float64Array;
  readonly filterPerS: Float64Array;
  /** a, s. */
  stageS: number;
  /** Solution of the latest `solveLinearised`. */
  readonly changeA: Float64Array;
}

export function createLinearised({ bank }: Kernel): Linearised {
  const chains = bank.chainOhm.length;
  const pairs = bank.timeConstantS.length;
  return {
    currentPerEmf: new Float64Array(chains * chains),
    currentPerS: new Float64Array(chains),
    factors: new Float64Array(chains * chains),
    drivenV: new Float64Array(chains),
    gaveOhm: new Float64Array(chains),
    filterGaveOhm: new Float64Array(pairs * chains),
    filterS: new Float64Array(pairs),
    filterPerS: Float64Array.from(bank.timeConstantS, (tauS) => 1 / tauS),
    stageS: 0,
    changeA: new Float64Array(chains),
  };
}

/** Linearises the currents at the bus point now. */
export function linearise(kernel: Kernel, linearised: Linearised): void {
  const { bus, emfPerS } = kernel;
  const { chains, currentPerEmf, currentPerBank, voltagePerEmf, bankOhm } = bus.map;
  const { regime, netW, bankV } = bus;
  let bankPerOpenV = 0;
  if (regime === CHARGER_HOLDS || regime === BUS_DEAD) {
    bankPerOpenV = -1 / bankOhm;
  } else if (regime !== BUS_OVERLOADED && netW !== 0) {
    const perV = netW / (bankV * bankV);
    bankPerOpenV = -perV / (1 + bankOhm * perV);
  }
  const into = linearised.currentPerEmf;
  for (let i = 0; i < chains; i++) {
    const share = currentPerBank[i] * bankPerOpenV;
    let perS = 0;
    for (let j = 0, at = i * chains; j < chains; j++, at++) {
      const perEmf = currentPerEmf[at] + share * voltagePerEmf[j];
      into[at] = perEmf;
      perS += perEmf * emfPerS[j];
    }
    linearised.currentPerS[i] = perS;
  }
}

/** Prepares `solveLinearised` for stages of `stageS` = gamma h. */
export function factorLinearised({ bank, emfPerAs }: Kernel, linearised: Linearised, stageS: number): void {
  const { chainPolarisationOhm } = bank;
  const { currentPerEmf, factors, gaveOhm, filterGaveOhm, filterS, filterPerS } = linearised;
  const chains = gaveOhm.length;
  linearised.stageS = stageS;
  for (let i = 0; i < chains; i++) gaveOhm[i] = stageS * emfPerAs[i];
  const giveOhm = linearised.drivenV;
  for (let i = 0; i < chains; i++) giveOhm[i] = gaveOhm[i];
  for (let k = 0, at = 0; k < filterS.length; k++) {
    const seconds = stageS / (1 + stageS * filterPerS[k]);
    filterS[k] = seconds;
    for (let i = 0; i < chains; i++, at++) {
      filterGaveOhm[at] = chainPolarisationOhm[at] * seconds;
      giveOhm[i] += filterGaveOhm[at] * filterPerS[k];
    }
  }
  for (let i = 0, at = 0; i < chains; i++) {
    for (let j = 0; j < chains; j++, at++) factors[at] = -currentPerEmf[at] * giveOhm[j];
    factors[i * chains + i] += 1;
  }
  factorLu(factors, chains);
}

/**
 * Solves one stage: (1 / a - J) u = r for charge and filtered currents at once.
 *
 * @param rateA right-hand sides of the charges, A; overwritten with their changes, As
 * @param filterRate right-hand sides of the filtered currents, A/s; overwritten with their changes, A
 */
export function solveLinearised(linearised: Linearised, rateA: Float64Array, filterRate: Float64Array): void {
  const { currentPerEmf, factors, drivenV, changeA, gaveOhm, filterGaveOhm, filterS, filterPerS, stageS } = linearised;
  const chains = drivenV.length;
  for (let i = 0; i < chains; i++) {
    let volts = gaveOhm[i] * rateA[i];
    for (let at = i; at < filterRate.length; at += chains) volts += filterGaveOhm[at] * filterRate[at];
    drivenV[i] = volts;
  }
  for (let i = 0, at = 0; i < chains; i++) {
    let sum = 0;
    for (let j = 0; j < chains; j++, at++) sum += currentPerEmf[at] * drivenV[j];
    changeA[i] = sum;
  }
  solveLu(factors, chains, changeA);
  for (let i = 0; i < chains; i++) rateA[i] = (rateA[i] + changeA[i]) * stageS;
  for (let k = 0, at = 0; k < filterS.length; k++) {
    const seconds = filterS[k];
    const perS = filterPerS[k];
    for (let i = 0; i < chains; i++, at++) filterRate[at] = (filterRate[at] + changeA[i] * perS) * seconds;
  }
}
