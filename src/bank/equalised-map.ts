import { factorLu, solveLu } from '../mathematics/small-lu.js';
import type { BankState } from './bank-state.js';
import { AT_LIMIT, type BankEqualiser, isAtWork, OFF } from './equaliser.js';
import type { NetworkMap } from './network.js';

/**
 * The map of a network whose modules have equalisers at their posts, regions kept. A source s into the posts of a module
 * of resistance R is an EMF of R s to the network, and s more in the module itself:
 *
 *   I = A E + b I_bank + T s,   V_bank = c . (E + R s) + r I_bank,   T = A R + 1
 *
 * with I the currents of the modules. The devices follow the terminal voltages, each within its region linearly, and drive
 * W i beside their standby s0:
 *
 *   i = gamma D (E + R I) + kappa,   s = s0 + W i
 *   (1 - gamma D R T W) i = gamma D (1 + R A) E + gamma D R b I_bank + gamma D R T s0 + kappa
 *
 * D takes lower from upper. Put in, this gives a map of the same form and constants beside it.
 */
export function equalisedMap(equaliser: BankEqualiser, state: BankState, base: NetworkMap): NetworkMap {
  const { settings, devices, lower, upper, moduleOhm, perVolt } = equaliser;
  const { chains: n, currentPerEmf, currentPerBank, voltagePerEmf } = base;
  const { efficiency, standbyA } = settings;

  // T, row by row.
  const through = new Float64Array(n * n);
  for (let i = 0; i < n; i++) {
    for (let j = 0; j < n; j++) through[i * n + j] = currentPerEmf[i * n + j] * moduleOhm[j] + (i === j ? 1 : 0);
  }
  const standing = new Float64Array(n);
  const gamma = new Float64Array(devices);
  const kappa = new Float64Array(devices);
  const intoLower = new Float64Array(devices);
  const intoUpper = new Float64Array(devices);
  for (let k = 0; k < devices; k++) {
    if (!isAtWork(equaliser, state.conduction, k)) continue;
    standing[lower[k]] -= standbyA;
    standing[upper[k]] -= standbyA;
    const region = state.equaliserRegion[k];
    if (region === OFF) continue;
    const sign = Math.sign(region);
    intoLower[k] = sign > 0 ? efficiency : 1;
    intoUpper[k] = sign > 0 ? -1 : -efficiency;
    if (Math.abs(region) === AT_LIMIT) kappa[k] = sign * settings.currentA;
    else {
      gamma[k] = perVolt;
      kappa[k] = -perVolt * sign * settings.startV;
    }
  }
  /** T W of device `k` at chain `i`. */
  const driven = (i: number, k: number): number =>
    through[i * n + lower[k]] * intoLower[k] + through[i * n + upper[k]] * intoUpper[k];
  /** D R x of device `k`. */
  const dropV = (k: number, x: (i: number) => number): number =>
    moduleOhm[upper[k]] * x(upper[k]) - moduleOhm[lower[k]] * x(lower[k]);
  const throughStanding = Float64Array.from({ length: n }, (_, i) =>
    standing.reduce((sum, amps, j) => sum + through[i * n + j] * amps, 0),
  );

  const factors = new Float64Array(devices * devices);
  for (let k = 0; k < devices; k++) {
    for (let e = 0; e < devices; e++) {
      factors[k * devices + e] = (k === e ? 1 : 0) - gamma[k] * dropV(k, (i) => driven(i, e));
    }
  }
  factorLu(factors, devices);
  const solved = (rightSide: (k: number) => number): Float64Array => {
    const x = Float64Array.from({ length: devices }, (_, k) => rightSide(k));
    solveLu(factors, devices, x);
    return x;
  };
  /** Sum over the devices of what they drive at chain `i`, and of the EMFs they are to the bus. */
  const drivenBy = (amps: Float64Array, i: number): number => amps.reduce((sum, a, k) => sum + driven(i, k) * a, 0);
  const liftV = (i: number): number => voltagePerEmf[i] * moduleOhm[i];
  const liftedBy = (amps: Float64Array): number =>
    amps.reduce((sum, a, k) => sum + (liftV(lower[k]) * intoLower[k] + liftV(upper[k]) * intoUpper[k]) * a, 0);

  const perEmf = Float64Array.from(currentPerEmf);
  const openPerEmf = Float64Array.from(voltagePerEmf);
  for (let j = 0; j < n; j++) {
    const amps = solved(
      (k) =>
        gamma[k] * ((upper[k] === j ? 1 : 0) - (lower[k] === j ? 1 : 0) + dropV(k, (i) => currentPerEmf[i * n + j])),
    );
    for (let i = 0; i < n; i++) perEmf[i * n + j] += drivenBy(amps, i);
    openPerEmf[j] += liftedBy(amps);
  }
  const ofBank = solved((k) => gamma[k] * dropV(k, (i) => currentPerBank[i]));
  const ofItself = solved((k) => gamma[k] * dropV(k, (i) => throughStanding[i]) + kappa[k]);
  return {
    chains: n,
    currentPerEmf: perEmf,
    currentPerBank: Float64Array.from(currentPerBank, (perA, i) => perA + drivenBy(ofBank, i)),
    voltagePerEmf: openPerEmf,
    bankOhm: base.bankOhm + liftedBy(ofBank),
    offsetA: throughStanding.map((amps, i) => amps + drivenBy(ofItself, i)),
    openOffsetV: standing.reduce((sum, amps, i) => sum + liftV(i) * amps, 0) + liftedBy(ofItself),
  };
}
