import { BUS_DEAD, BUS_OVERLOADED, CHARGER_HOLDS } from '../bank/bus.js';
import { factorLu, solveLu } from '../mathematics/small-lu.js';
import type { Kernel } from './kernel.js';

/**
 * The bank linearised about the start of a step, with pattern and regime kept: chain currents follow small changes of
 * the EMFs by `currentPerEmf`, the EMFs follow charge and filtered currents by their slopes.
 *
 *   dI = M dE,   dE_i = E'_i dq_i + sum_k R_ki dF_ki,   dq_i/dt = I_i,   dF_ki/dt = (I_i - F_ki) / tau_k
 *
 * What an implicit step of length h has to solve, with g = 1 / (gamma h), is the same bank at rest with each chain's
 * resistance made larger by what its EMF gives way over the step:
 *
 *   (1 - M D) dI = M w,   D_i = E'_i / g + sum_k R_ki / (1 + g tau_k)
 */
export interface Linearised {
  /** M, row by row, S. */
  readonly currentPerEmf: Float64Array;
  /** Change of the chain currents with time alone, A/s. */
  readonly currentPerS: Float64Array;
  /** 1 - M D, factored. */
  readonly factors: Float64Array;
  readonly drivenV: Float64Array;
  /** Solution of the latest `solveLinearised`. */
  readonly changeA: Float64Array;
}

export function createLinearised(chains: number): Linearised {
  return {
    currentPerEmf: new Float64Array(chains * chains),
    currentPerS: new Float64Array(chains),
    factors: new Float64Array(chains * chains),
    drivenV: new Float64Array(chains),
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

/** Prepares `solveLinearised` for a step, `g` = 1 / (gamma h), 1/s. */
export function factorLinearised(kernel: Kernel, linearised: Linearised, g: number): void {
  const { bank, emfPerAs } = kernel;
  const { timeConstantS, chainPolarisationOhm } = bank;
  const { currentPerEmf, factors, drivenV } = linearised;
  const chains = drivenV.length;
  const giveOhm = drivenV;
  for (let i = 0; i < chains; i++) giveOhm[i] = emfPerAs[i] / g;
  for (let k = 0; k < timeConstantS.length; k++) {
    const share = 1 / (1 + g * timeConstantS[k]);
    for (let i = 0; i < chains; i++) giveOhm[i] += share * chainPolarisationOhm[k * chains + i];
  }
  for (let i = 0; i < chains; i++) {
    for (let j = 0, at = i * chains; j < chains; j++, at++) factors[at] = -currentPerEmf[at] * giveOhm[j];
    factors[i * chains + i] += 1;
  }
  factorLu(factors, chains);
}

/**
 * Solves one stage: (g - J) u = r for charge and filtered currents at once.
 *
 * @param rateA right-hand sides of the charges; overwritten with their changes
 * @param filterRate right-hand sides of the filtered currents, A/s; overwritten with their changes
 */
export function solveLinearised(
  kernel: Kernel,
  linearised: Linearised,
  g: number,
  rateA: Float64Array,
  filterRate: Float64Array,
): void {
  const { bank, emfPerAs } = kernel;
  const { timeConstantS, chainPolarisationOhm } = bank;
  const { currentPerEmf, factors, drivenV, changeA } = linearised;
  const chains = drivenV.length;
  for (let i = 0; i < chains; i++) drivenV[i] = (emfPerAs[i] * rateA[i]) / g;
  for (let k = 0; k < timeConstantS.length; k++) {
    const perRateS = 1 / (g + 1 / timeConstantS[k]);
    for (let i = 0, at = k * chains; i < chains; i++, at++) {
      drivenV[i] += chainPolarisationOhm[at] * filterRate[at] * perRateS;
    }
  }
  for (let i = 0; i < chains; i++) {
    let sum = 0;
    for (let j = 0, at = i * chains; j < chains; j++, at++) sum += currentPerEmf[at] * drivenV[j];
    changeA[i] = sum;
  }
  solveLu(factors, chains, changeA);
  for (let i = 0; i < chains; i++) rateA[i] = (rateA[i] + changeA[i]) / g;
  for (let k = 0; k < timeConstantS.length; k++) {
    const perS = 1 / timeConstantS[k];
    const inverse = 1 / (g + perS);
    for (let i = 0, at = k * chains; i < chains; i++, at++) {
      filterRate[at] = (filterRate[at] + changeA[i] * perS) * inverse;
    }
  }
}
