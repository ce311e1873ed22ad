import { FORWARD } from '../../src/bank/network.js';
import { compileOcvCurves } from '../../src/bank/ocv-curves.js';
import { chargePathOpen, dischargePathOpen } from '../../src/bank/paths.js';
import { dutyCourse } from '../../src/duty/course.js';
import { closeAccount } from '../../src/simulation/accountant.js';
import type { Journey } from '../../src/simulation/advance.js';
import { runCourse } from '../../src/simulation/run-course.js';
import { startBank } from '../../src/simulation/simulate-instance.js';
import { busEnergyJ, evaluateWithin } from '../../src/simulation/step.js';
import { ocvCurve } from '../reference/ocv-curve.js';
import type { ReferenceBank } from '../reference/reference-bank.js';
import { studyOf } from '../reference/study-of.js';

/** Nodes and weights of Gauss's rule with three points on [0, 1]. */
const GAUSS = [
  [0.5 - Math.sqrt(0.15), 5 / 18],
  [0.5, 8 / 18],
  [0.5 + Math.sqrt(0.15), 5 / 18],
] as const;

/** The balances are exact, but for the error of the steps: taken at a tenth of their tolerances. */
const BALANCE_TOLERANCE = 0.1;

/** Molar gas constant, J/(mol K), and 25 degC, K. */
const GAS = 8.314;
const WARM_K = 298.15;

/** Share of charge out of reach: 0 at 25 degC, 0.05 at 0, 0.12 at -10, straight between and beyond. */
function floorAt(kelvin: number): number {
  const celsius = kelvin - 273.15;
  return Math.min(0.5, Math.max(0, celsius < 0 ? 0.05 - 0.007 * celsius : 0.05 - 0.002 * celsius));
}

/** Integral of a curve between two values, by Simpson's rule. */
function integralOf(curve: (x: number) => number, from: number, to: number): number {
  const parts = 400;
  let sum = 0;
  for (let part = 0; part <= parts; part++) {
    sum += (part === 0 || part === parts ? 1 : part % 2 === 1 ? 4 : 2) * curve(from + ((to - from) * part) / parts);
  }
  return (sum * (to - from)) / (3 * parts);
}

/**
 * Charge and energy of one bank with rails and equalisers over its course, kept from its modules as they are written down,
 * laws of temperature, fade, devices and conductors written out here, and the currents and the capacity left that the
 * engine finds; beside the engine's own account.
 */
export function accountsOf(bank: ReferenceBank) {
  const { candidate } = bank;
  const { equaliser, takeOff } = candidate;
  if (equaliser === undefined || takeOff === undefined) throw new RangeError('not everything');
  const modules = bank.modules.flat();
  const positions = bank.modules[0].length;
  const slots = candidate.slotOffsetK?.flat() ?? [];
  const cellOf = modules.flatMap((module, m) =>
    module.capacityAh.map((ampereHours, k) => ({ m, module, k, ampereHours })),
  );
  const floats = (): Float64Array => new Float64Array(cellOf.length);
  const sums = {
    busJ: 0,
    turnoverJ: 0,
    storedJ: 0,
    cellsJ: 0,
    pathsJ: 0,
    wiringJ: 0,
    devicesJ: 0,
    slackJ: 0,
    strayAs: 0,
    throughputAs: 0,
  };
  const charge = {
    gainedAs: floats(),
    currentAs: floats(),
    passedAs: floats(),
    slackAs: floats(),
    visitedAs: floats(),
    fadedAs: floats(),
  };
  const curve = ocvCurve(bank.ocvTables[0]);
  const seen = new Set<string>();
  let leapt = false;
  let visited = false;
  let ambientK = Number.NaN;
  const left = floats().fill(1);
  let from: Float64Array | null = null;
  const kelvinOf = (m: number): number => ambientK + slots[m] + (modules[m].temperatureOffsetK ?? 0);

  /** Takes stock of the cells: nothing but currents has changed them since the latest time. */
  const takeStock = (now: Float64Array): void => {
    const before = from;
    if (before === null) return;
    cellOf.forEach(({ m, ampereHours }, c) => {
      const floor = floorAt(kelvinOf(m));
      const reach = (z: number): number => (z - floor) / (1 - floor);
      const capacityAs = 3600 * ampereHours * left[c];
      charge.gainedAs[c] += capacityAs * (now[c] - before[c]);
      sums.storedJ += capacityAs * (1 - floor) * integralOf(curve, reach(before[c]), reach(now[c]));
    });
  };

  /** Cells have aged since the latest step: at their charge fractions, what they lost of their capacity has gone. */
  const takeFade = ({ kernel, ageing }: Journey): void => {
    if (ageing === null) throw new RangeError('nothing ages');
    takeStock(kernel.state.charge);
    cellOf.forEach(({ ampereHours }, c) => {
      charge.fadedAs[c] += 3600 * ampereHours * (left[c] - ageing.left[c]) * kernel.state.charge[c];
    });
    left.set(ageing.left);
  };

  const onStep = (moving: Journey, stepS: number): void => {
    const { kernel, work } = moving;
    const { state, bank: built, offsetA, chainOfCell, point } = kernel;
    const around = moving.climate?.ambientK ?? WARM_K;
    if (visited || around !== ambientK) {
      if (!visited) takeStock(state.charge);
      else
        cellOf.forEach(({ ampereHours }, c) => {
          charge.visitedAs[c] += 3600 * ampereHours * left[c] * (state.charge[c] - (from?.[c] ?? Number.NaN));
        });
      from = Float64Array.from(state.charge);
      visited = false;
      ambientK = around;
    }
    leapt ||= moving.chatter.module >= 0;
    const speed = (joulesPerMol: number, m: number): number =>
      Math.exp((-joulesPerMol / GAS) * (1 / kelvinOf(m) - 1 / WARM_K));
    const cells = cellOf.map(({ m, module, k }, c) => {
      const grown = 1 + (module.ageing?.resistanceGrowth ?? 0) * (1 - left[c]);
      const resists = grown * speed(-(module.activation?.resistanceJPerMol ?? 0), m);
      return {
        m,
        efficiency: module.efficiency[k],
        leakageA: module.leakageA[k] * speed(module.activation?.leakageJPerMol ?? 0, m),
        ohm: module.resistanceOhm[k] * resists,
        pairs: module.polarisation.map(({ timeConstantS, resistanceOhm }) => ({
          timeConstantS,
          ohm: resistanceOhm[k] * resists,
        })),
        floor: floorAt(kelvinOf(m)),
      };
    });
    const isClosed = modules.map((_, m) => !chargePathOpen(built, state, m) && !dischargePathOpen(built, state, m));
    const busJ = busEnergyJ(kernel, work);
    sums.busJ += busJ;
    sums.turnoverJ += Math.abs(busJ);
    for (const [theta, weight] of GAUSS) {
      evaluateWithin(kernel, work, theta);
      const spanS = weight * stepS;
      const terminalV = new Float64Array(modules.length);
      cells.forEach(({ m, efficiency, leakageA, ohm, pairs, floor }, c) => {
        const chainA = point.currentA[chainOfCell[c]];
        const cellA = chainA - offsetA[c];
        const z =
          state.charge[c] +
          kernel.chargePerAs[c] * work.passedAs[chainOfCell[c]] +
          kernel.chargePerS[c] * theta * stepS;
        const openV = curve((z - floor) / (1 - floor));
        let cellV = point.cellV[c] + ohm * cellA;
        pairs.forEach(({ timeConstantS, ohm: pairOhm }, k) => {
          const decay = Math.exp((-theta * stepS) / timeConstantS);
          const offset = offsetA[c] + (state.offsetFilterA[k * cells.length + c] - offsetA[c]) * decay;
          cellV += pairOhm * (work.filterA[k * point.currentA.length + chainOfCell[c]] - offset);
        });
        const gained = cellA > 0 ? efficiency : 1;
        terminalV[m] += cellV;
        charge.currentAs[c] += spanS * (gained * cellA - leakageA);
        sums.cellsJ += spanS * (openV * (leakageA + (1 - gained) * cellA + offsetA[c]) + (cellV - openV) * chainA);
      });
      const moduleA = modules.map((_, m) => point.currentA[built.chainOfModule[m]]);
      modules.forEach(({ pathResistanceOhm }, m) => {
        terminalV[m] += pathResistanceOhm * moduleA[m];
        sums.pathsJ += spanS * pathResistanceOhm * moduleA[m] ** 2;
        const chain = built.chainOfModule[m];
        if (state.conduction[chain] === FORWARD) sums.pathsJ += spanS * state.chainDropV[chain] * Math.abs(moduleA[m]);
      });
      // The law of the devices, from the voltages at the posts.
      const leadA = [...moduleA];
      for (let m = 0; m < modules.length; m++) {
        if ((m + 1) % positions === 0 || !isClosed[m] || !isClosed[m + 1]) continue;
        const [high, low] = terminalV[m + 1] > terminalV[m] ? [m + 1, m] : [m, m + 1];
        const { startV, fullV, currentA, efficiency, standbyA } = equaliser;
        const share = (terminalV[high] - terminalV[low] - startV) / (fullV - startV);
        const amps = state.equaliserOn[0] * currentA * Math.min(1, Math.max(0, share));
        seen.add(amps === 0 ? 'device at rest' : share < 1 ? 'device in proportion' : 'device at its limit');
        leadA[high] += amps + standbyA;
        leadA[low] += standbyA - efficiency * amps;
        sums.devicesJ +=
          spanS * (terminalV[high] * (amps + standbyA) + terminalV[low] * (standbyA - efficiency * amps));
      }
      sums.wiringJ += spanS * wiringW(bank, leadA);
      const bankA = leadA.reduce((sum, amps, m) => (m % positions === 0 ? sum + amps : sum), 0);
      sums.strayAs += spanS * Math.abs(bankA - point.bankA);
      sums.throughputAs += spanS * Math.abs(bankA);
    }
    evaluateWithin(kernel, work, 1);
    cells.forEach(({ m, efficiency, leakageA }, c) => {
      const amps = [work.firstA, work.lastA].map((of) => of[chainOfCell[c]] - offsetA[c]);
      const [lowA, highA] = [Math.min(...amps), Math.max(...amps)];
      const cellAs = work.endAs[chainOfCell[c]] - offsetA[c] * stepS;
      charge.passedAs[c] += (cellAs > 0 ? efficiency : 1) * cellAs - leakageA * stepS;
      // What is open within a step: whether a cell charges where it turns round, which is seen to 10 mA, and when bleed
      // switched.
      if (lowA < 0.01 && highA > -0.01) charge.slackAs[c] += (1 - efficiency) * Math.max(-lowA, highA) * stepS;
      if (state.bleeding[c] === 1) seen.add('bleed');
      if (moving.bleedPlan.switched[c] === 0) return;
      charge.slackAs[c] += built.bleedA[m] * stepS;
      sums.slackJ += 4 * built.bleedA[m] * stepS;
    });
  };

  const study = studyOf(bank);
  const named = new Map(modules.map((module) => [module.id, module]));
  const parts = { study, candidate, ocv: compileOcvCurves(bank.ocvTables), toleranceFactor: BALANCE_TOLERANCE };
  const { journey, recorder, accountant, visits } = startBank(parts, named, {
    onStep,
    onEvent: ({ kind }) => {
      seen.add(kind);
      if (kind !== 'upkeep-visit') return;
      takeFade(journey);
      from = Float64Array.from(journey.kernel.state.charge);
      visited = true;
    },
  });
  const heldAs = ({ bank: now, state }: Journey['kernel']): Float64Array =>
    state.charge.map((z, c) => z * now.capacityAs[c]);
  const startAs = heldAs(journey.kernel);
  runCourse(journey, recorder, dutyCourse(study.duty, study.cycles), bank, undefined, visits);
  takeFade(journey);
  return {
    sums,
    charge: {
      ...charge,
      startAs,
      endAs: heldAs(journey.kernel),
      saidToHaveFadedAs: journey.ageing?.fadedAs ?? floats(),
    },
    left,
    capacityAs: cellOf.map(({ ampereHours }) => 3600 * ampereHours),
    seen,
    leapt,
    account: closeAccount(accountant, journey),
  };
}

/** Heat in leads, links and rails, W, from the currents of the leads below each module. */
function wiringW({ candidate, modules }: ReferenceBank, leadA: readonly number[]): number {
  const positions = modules[0].length;
  const at = (string: number, position: number): number => leadA[string * positions + position];
  let heatW = 0;
  modules.forEach((_, string) => {
    const { negativeOhm, betweenOhm, positiveOhm } = candidate.leads[string];
    heatW += negativeOhm * at(string, 0) ** 2 + positiveOhm * at(string, positions - 1) ** 2;
    for (let position = 1; position < positions; position++) heatW += betweenOhm * at(string, position) ** 2;
  });
  if (candidate.wiring === 'cross-linked') {
    // What comes down to a tap and does not go on to the module below passes the link to the next string.
    for (let position = 1; position < positions; position++) {
      let linkA = 0;
      for (let string = 0; string + 1 < modules.length; string++) {
        linkA += at(string, position) - at(string, position - 1);
        heatW += candidate.linkOhm * linkA ** 2;
      }
    }
  }
  // A segment carries what all strings on the far side of it carry.
  candidate.takeOff?.segmentOhm.forEach((ohm, segment) => {
    const sumOf = (position: number, isWanted: (string: number) => boolean): number =>
      modules.reduce((sum, _, string) => (isWanted(string) ? sum + at(string, position) : sum), 0);
    const beyond = (string: number): boolean => string > segment;
    const before = (string: number): boolean => string <= segment;
    heatW += ohm * sumOf(0, beyond) ** 2;
    heatW += ohm * sumOf(positions - 1, candidate.takeOff?.kind === 'same-end' ? beyond : before) ** 2;
  });
  return heatW;
}
