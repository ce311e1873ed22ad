/** Margins below full at which a cutoff on charge counts as early, fractions; the second is the one reported first. */
export const EARLY_MARGINS = [0.02, 0.05, 0.1] as const;

/** A cutoff as the accumulator is told of it. */
export interface Cutoff {
  readonly direction: 'charge' | 'discharge';
  readonly cause: 'voltage' | 'current';
  /** Slot and cell, from 1; cell 0 where no cell caused it. */
  readonly string: number;
  readonly position: number;
  readonly cell: number;
  /** Largest shortfall below full of a module of the bank, fraction; on charge only. */
  readonly shortfall: number;
  /** Mean charge of the modules of the string, Ah; on discharge only. */
  readonly chargeLeftAh: number;
}

/** First cutoff of a kind within the horizon. */
export interface FirstCutoff {
  readonly cycle: number;
  readonly string: number;
  readonly position: number;
  readonly cell: number;
}

/**
 * What happened in every cycle of one instance, one array element per cycle (index = cycle - 1). Flags are bits:
 * on charge 1, 2, 4 for the margins of `EARLY_MARGINS`.
 */
export interface CycleLog {
  readonly cycles: number;
  readonly chargeCutoff: Uint8Array;
  readonly chargeCutoffByVoltage: Uint8Array;
  readonly chargeCutoffByCurrent: Uint8Array;
  readonly dischargeCutoff: Uint8Array;
  readonly dischargeCutoffByVoltage: Uint8Array;
  readonly dischargeCutoffByCurrent: Uint8Array;
  readonly stringLost: Uint8Array;
  readonly loadLost: Uint8Array;
  readonly endedByBms: Uint8Array;
  readonly lostWh: Float64Array;
  readonly chargeMissedAh: Float64Array;
  readonly chargeLeftAh: Float64Array;
  /** Drift at the end of the cycle, Ah; of modules NaN-free only where a string has more than one. */
  readonly moduleDriftAh: Float64Array;
  readonly cellDriftAh: Float64Array;
  readonly chargeSpread: Float64Array;
  readonly trips: Float64Array;
  firstOnCharge: FirstCutoff | null;
  firstOnDischarge: FirstCutoff | null;
  overVoltageTrips: number;
  underVoltageTrips: number;
  overCurrentTrips: number;
  averagedChatter: boolean;
  elapsedS: number;
}

/** Margin bit of the margin that is reported first. */
export const MAIN_MARGIN = 2;

export function createCycleLog(cycles: number): CycleLog {
  const bytes = (): Uint8Array => new Uint8Array(cycles);
  const floats = (): Float64Array => new Float64Array(cycles);
  return {
    cycles,
    chargeCutoff: bytes(),
    chargeCutoffByVoltage: bytes(),
    chargeCutoffByCurrent: bytes(),
    dischargeCutoff: bytes(),
    dischargeCutoffByVoltage: bytes(),
    dischargeCutoffByCurrent: bytes(),
    stringLost: bytes(),
    loadLost: bytes(),
    endedByBms: bytes(),
    lostWh: floats(),
    chargeMissedAh: floats(),
    chargeLeftAh: floats(),
    moduleDriftAh: floats(),
    cellDriftAh: floats(),
    chargeSpread: floats(),
    trips: floats(),
    firstOnCharge: null,
    firstOnDischarge: null,
    overVoltageTrips: 0,
    underVoltageTrips: 0,
    overCurrentTrips: 0,
    averagedChatter: false,
    elapsedS: 0,
  };
}

/**
 * Records a cutoff in a cycle (from 1). The caller has made sure that it came early in the sense of the duty: before the
 * charger's criterion, or with load still to serve; how far from full decides about margins here.
 */
export function logCutoff(log: CycleLog, cycle: number, cutoff: Cutoff): void {
  const { string, position, cell } = cutoff;
  const at = cycle - 1;
  if (cutoff.direction === 'charge') {
    let bits = 0;
    EARLY_MARGINS.forEach((margin, k) => {
      if (cutoff.shortfall > margin) bits |= 1 << k;
    });
    log.chargeCutoff[at] |= bits;
    if ((bits & MAIN_MARGIN) === 0) return;
    (cutoff.cause === 'voltage' ? log.chargeCutoffByVoltage : log.chargeCutoffByCurrent)[at] = 1;
    log.firstOnCharge ??= { cycle, string, position, cell };
    return;
  }
  if (log.dischargeCutoff[at] === 0) log.chargeLeftAh[at] = cutoff.chargeLeftAh;
  log.dischargeCutoff[at] = 1;
  (cutoff.cause === 'voltage' ? log.dischargeCutoffByVoltage : log.dischargeCutoffByCurrent)[at] = 1;
  log.firstOnDischarge ??= { cycle, string, position, cell };
}
