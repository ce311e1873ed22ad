import type { Bank } from '../bank/bank.js';
import { type BankState, copyBankState } from '../bank/bank-state.js';
import type { TestedCapacity } from '../measures/instance-measures.js';
import type { Candidate, DutySegment } from '../study/study.js';
import { createJourney, type Journey } from './advance.js';
import { runSegment } from './run-cycle.js';
import { busEnergyJ } from './step.js';

const HOUR_S = 3600;
const LONGEST_CHARGE_S = 24 * HOUR_S;
const REST_S = HOUR_S;
/** Time in which the test current would empty the rated bank, h. */
const TEST_HOURS = 5;
/** Voltage at which a demand in amperes is valued in energy, V per cell in series. */
export const NOMINAL_CELL_V = 3.2;
const FACTORS = { loadFactor: 1, chargeFactor: 1 };

/**
 * Usable capacity of a bank as it stands, found on a copy of its state with latches kept: its own charger to the end of
 * charge (24 h at most), 1 h rest, then a fifth of rated capacity per hour until that cannot be carried for the first
 * time. A string may be lost on the way; a low-voltage disconnect plays no part. The test stands at 25 degC, so that a BMS
 * which refuses to charge a cold bank allows it here.
 *
 * @param bank at 25 degC
 * @param nowS time that the state belongs to
 */
export function testCapacity(
  bank: Bank,
  state: BankState,
  candidate: Candidate,
  nowS: number,
  toleranceFactor = 1,
): TestedCapacity {
  const copy = copyBankState(bank, state);
  copy.tooCold.fill(0);
  let discharging = false;
  let firstStringS: number | null = null;
  let emptyS: number | null = null;
  let deliveredJ = 0;
  const journey: Journey = createJourney(
    bank,
    copy,
    candidate.charger,
    { ...candidate.load, disconnectV: null },
    {
      onEvent: ({ kind, timeS }) => {
        if (!discharging) return;
        if (kind === 'under-voltage-trip' || kind === 'over-current-discharge-trip') firstStringS ??= timeS;
        if (kind === 'load-lost') emptyS ??= timeS;
      },
      onStep: ({ kernel, work }) => {
        if (discharging && emptyS === null) deliveredJ -= busEnergyJ(kernel, work);
      },
    },
    toleranceFactor,
  );
  journey.kernel.nowS = nowS;
  const testA = bank.ratedAh / TEST_HOURS;
  runSegment(journey, segment({ durationS: LONGEST_CHARGE_S, chargeW: null, endsWhenCharged: true }), FACTORS);
  runSegment(journey, segment({ durationS: REST_S }), FACTORS);
  const startS = journey.kernel.nowS;
  discharging = true;
  runSegment(journey, segment({ durationS: 4 * TEST_HOURS * HOUR_S, loadA: testA }), FACTORS, () => emptyS !== null);
  const endS = emptyS ?? journey.kernel.nowS;
  const delivered = (untilS: number): number => (testA * (untilS - startS)) / HOUR_S;
  const usableAh = delivered(endS);
  return {
    usableAh,
    usableWh: deliveredJ / HOUR_S,
    toFirstStringAh: firstStringS === null ? usableAh : Math.min(usableAh, delivered(firstStringS)),
    idealAh: bank.capacityAs.reduce((sum, capacity) => sum + capacity, 0) / HOUR_S / cellsInSeries(bank),
  };
}

/** Cells from bus minus to bus plus. */
export function cellsInSeries(bank: Bank): number {
  return bank.cellStart[bank.positions];
}

function segment(terms: Partial<DutySegment>): DutySegment {
  return { durationS: 0, loadW: 0, loadA: 0, chargeW: 0, endsWhenCharged: false, ...terms };
}
