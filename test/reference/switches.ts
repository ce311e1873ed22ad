/** An over-current guard of one direction. */
export interface OverCurrentState {
  open: boolean;
  locked: boolean;
  /** Trips that count towards the lock. */
  tripsS: number[];
}

/** What a BMS remembers. */
export interface PackSwitches {
  overVoltage: boolean;
  underVoltage: boolean;
  readonly overCurrent: { readonly charge: OverCurrentState; readonly discharge: OverCurrentState };
  /** The forward drop of a one-way path has been switched away. */
  reclosed: boolean;
  asleep: boolean;
  /** Per cell. */
  readonly bleeding: boolean[];
}

/** What the charger, the load and the duty remember. */
export interface BankSwitches {
  chargeEnded: boolean;
  loadConnected: boolean;
  /** The load asked for more than the bank can give and has not come back yet. */
  overloaded: boolean;
  /** A connected load goes without, for whatever reason. */
  loadLost: boolean;
}

export function closedPack(cells: number): PackSwitches {
  return {
    overVoltage: false,
    underVoltage: false,
    overCurrent: {
      charge: { open: false, locked: false, tripsS: [] },
      discharge: { open: false, locked: false, tripsS: [] },
    },
    reclosed: false,
    asleep: false,
    bleeding: new Array<boolean>(cells).fill(false),
  };
}

export function chargeOpen(pack: PackSwitches, opens: 'path' | 'both'): boolean {
  const { charge, discharge } = pack.overCurrent;
  return pack.overVoltage || charge.open || (opens === 'both' && discharge.open);
}

export function dischargeOpen(pack: PackSwitches, opens: 'path' | 'both'): boolean {
  const { charge, discharge } = pack.overCurrent;
  return pack.underVoltage || discharge.open || (opens === 'both' && charge.open);
}
