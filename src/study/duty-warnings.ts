import type { NominalModule } from './bank-module.js';
import type { Candidate, Duty, Study } from './study.js';

/** Longest stretch of load that counts as a short peak, s [own choice]. */
const SHORT_PEAK_S = 300;
/** Cycles at the end of the horizon that measures such as early cutoffs speak of. */
const WINDOW_CYCLES = 30;
/** Nominal voltage of a lithium iron phosphate cell, V. */
const CELL_V = 3.2;

/** @returns what the duty leaves untested, whatever the candidate */
export function dutyWarnings({ duty, cycles }: Study): readonly string[] {
  return [...peakWarnings(duty), ...partsThatNeverRun(duty, cycles), ...partsBeforeTheWindow(duty, cycles)];
}

function peakWarnings({ kind, parts }: Duty): readonly string[] {
  const loads = parts.flatMap((part) => part.cycles.flat()).filter(({ loadW, loadA }) => loadW > 0 || loadA > 0);
  if (loads.length === 0 || loads.some(({ durationS }) => durationS <= SHORT_PEAK_S)) return [];
  const where =
    kind === 'profile' ? 'the columns load_peak_W and peak_s' : 'load_peak_W and peak_s of a discharge phase';
  return [`no load of the duty is short: short peaks are not tested; if the site has any, add them in ${where}`];
}

function partsThatNeverRun({ parts }: Duty, cycles: number): readonly string[] {
  let before = 0;
  const never: string[] = [];
  for (const part of parts) {
    if (before >= cycles) never.push(part.name);
    before += part.repeat * part.cycles.length;
  }
  if (never.length === 0) return [];
  return [
    `${cycles} cycles end before these parts of the duty begin: ${never.join(', ')}; all parts take ${before} cycles`,
  ];
}

/** Parts that run, but not in the window at the end of the horizon: the measures of that window do not know of them. */
function partsBeforeTheWindow({ parts }: Duty, cycles: number): readonly string[] {
  const namesFrom = (first: number): readonly string[] => [
    ...new Set(Array.from({ length: cycles - first + 1 }, (_, index) => partOfCycle(parts, first + index))),
  ];
  const seen = namesFrom(Math.max(1, cycles - WINDOW_CYCLES + 1));
  const unseen = namesFrom(1).filter((name) => !seen.includes(name));
  if (unseen.length === 0) return [];
  return [
    `measures of the last ${WINDOW_CYCLES} cycles see ${seen.join(', ')} only, not ${unseen.join(', ')}; to judge by the ` +
      'hardest part, choose cycles so that they end with it',
  ];
}

/** Name of the part that a cycle (from 1) belongs to; after the last part the first begins again. */
function partOfCycle(parts: Duty['parts'], cycle: number): string {
  const ends: number[] = [];
  for (const { repeat, cycles } of parts) ends.push((ends.at(-1) ?? 0) + repeat * cycles.length);
  const place = (cycle - 1) % (ends.at(-1) ?? 1);
  return parts[ends.findIndex((end) => place < end)]?.name ?? '';
}

/**
 * Warns where what the bank is asked for before it can be charged is more than it arrives with: such a loss says nothing
 * about wiring.
 *
 *   demand = sum of max(0, load - charging power) / (3.2 V x cells in series), up to the first segment whose charging
 *   power reaches its load;   arrival = sum over strings of the least z Q of their modules
 */
export function warnOfFirstDemand(
  duty: Duty,
  { commissioning }: Candidate,
  strings: readonly (readonly NominalModule[])[],
  warn: (text: string) => void,
): void {
  if (commissioning === 'each-module-full') return;
  const bankV = CELL_V * (strings[0]?.reduce((sum, { cells }) => sum + cells, 0) ?? 0);
  const arrivalAh = strings.reduce(
    (sum, string) => sum + Math.min(...string.map(({ capacityAh, arrivalCharge }) => capacityAh * arrivalCharge)),
    0,
  );
  const demandAh = firstDemandAh(duty, bankV);
  if (demandAh <= arrivalAh) return;
  warn(
    `the duty asks for about ${Math.round(demandAh)} Ah before it can charge, and the bank arrives with ` +
      `${Math.round(arrivalAh)} Ah: the first cycles tell how the modules arrived; begin with a charge, raise ` +
      'arrival_charge_percent, or set commissioning: each-module-full',
  );
}

function firstDemandAh({ parts, loadFactor, chargeFactor }: Duty, bankV: number): number {
  let demandAh = 0;
  for (const { durationS, loadW, loadA, chargeW } of parts.flatMap(({ cycles }) => cycles.flat())) {
    const loadAtBankW = loadFactor.nominal * (loadW + loadA * bankV);
    if (chargeW === null || (chargeW > 0 && chargeFactor.nominal * chargeW >= loadAtBankW)) break;
    demandAh += (Math.max(0, loadAtBankW - chargeFactor.nominal * chargeW) / bankV) * (durationS / 3600);
  }
  return demandAh;
}
