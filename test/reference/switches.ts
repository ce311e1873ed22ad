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
  /** Charging is refused. */
  tooCold: boolean;
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
  /** The bank voltage has the equalisers work. */
  equalising: boolean;
  /** A connected load goes without, for whatever reason. */
  loadLost: boolean;
}

export function closedPack(cells: number): PackSwitches {
  return {
    overVoltage: false,
    underVoltage: false,
    tooCold: false,
    overCurrent: {
      charge: { open: false, locked: false, tripsS: [] },
      discharge: { open: false, locked: false, tripsS: [] },
    },
    reclosed: false,
    asleep: false,
    bleeding: new Array<boolean>(cells).fill(false),
  };
}

/** What a person at the bank does to a BMS: everything is closed and forgotten, but cold it stays. */
export function clearPack(pack: PackSwitches): void {
  pack.overVoltage = pack.underVoltage = pack.reclosed = pack.asleep = false;
  for (const guard of [pack.overCurrent.charge, pack.overCurrent.discharge]) {
    guard.open = guard.locked = false;
    guard.tripsS = [];
  }
  pack.bleeding.fill(false);
}

export function chargeOpen(pack: PackSwitches, opens: 'path' | 'both'): boolean {
  const { charge, discharge } = pack.overCurrent;
  return pack.overVoltage || pack.tooCold || charge.open || (opens === 'both' && discharge.open);
}

export function dischargeOpen(pack: PackSwitches, opens: 'path' | 'both'): boolean {
  const { charge, discharge } = pack.overCurrent;
  return pack.underVoltage || discharge.open || (opens === 'both' && charge.open);
}
