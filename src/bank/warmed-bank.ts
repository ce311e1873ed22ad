import type { Bank } from './bank.js';
import { sumChains } from './chain-sums.js';
import { coldCurves } from './cold-curves.js';
import { moduleOhm } from './equaliser.js';
import { arrheniusFactor, chargeFloor, REFERENCE_K } from './temperature.js';

/**
 * A bank as it is while its modules have given temperatures: cell resistances, leakage and the reach of the open-circuit
 * curves follow them, BMS paths, joints and leads do not.
 *
 * @param bank at 25 degC
 * @param temperatureK of each module
 * @returns `bank` itself where every module has 25 degC
 */
export function warmedBank(bank: Bank, temperatureK: Float64Array): Bank {
  if (temperatureK.every((kelvin) => kelvin === REFERENCE_K)) return bank;
  const { cells, moduleOfCell, temperature } = bank;
  const resistanceOhm = Float64Array.from(bank.resistanceOhm);
  const polarisationOhm = Float64Array.from(bank.polarisationOhm);
  const leakageA = Float64Array.from(bank.leakageA);
  for (let c = 0; c < cells; c++) {
    const kelvin = temperatureK[moduleOfCell[c]];
    const resists = arrheniusFactor(-temperature.resistanceJPerMol[c], kelvin);
    resistanceOhm[c] *= resists;
    for (let at = c; at < polarisationOhm.length; at += cells) polarisationOhm[at] *= resists;
    leakageA[c] *= arrheniusFactor(temperature.leakageJPerMol[c], kelvin);
  }
  const sums = sumChains({ ...bank, resistanceOhm, polarisationOhm });
  return {
    ...bank,
    ...warmedCurves(bank, temperatureK),
    resistanceOhm,
    polarisationOhm,
    leakageA,
    ...sums,
    equaliser: bank.equaliser && { ...bank.equaliser, moduleOhm: moduleOhm(bank.wiring, sums.chainOhm) },
  };
}

/** The curves of all cells, one for each curve and floor that occur. */
function warmedCurves(bank: Bank, temperatureK: Float64Array): Pick<Bank, 'ocv' | 'curveOfCell'> {
  const floors = Array.from(temperatureK, chargeFloor);
  if (floors.every((floor) => floor === 0)) return { ocv: bank.ocv, curveOfCell: bank.curveOfCell };
  const numberOf = new Map<string, number>();
  const cold: { readonly curve: number; readonly floor: number }[] = [];
  const curveOfCell = bank.curveOfCell.map((curve, c) => {
    const floor = floors[bank.moduleOfCell[c]];
    const name = `${curve} ${floor}`;
    const known = numberOf.get(name);
    if (known !== undefined) return known;
    numberOf.set(name, cold.length);
    cold.push({ curve, floor });
    return cold.length - 1;
  });
  return { ocv: coldCurves(bank.ocv, cold), curveOfCell };
}
