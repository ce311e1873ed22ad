/** What can happen to a bank. Names as in `events.csv`. */
export type BankEventKind =
  | 'over-voltage-trip'
  | 'over-voltage-release'
  | 'under-voltage-trip'
  | 'under-voltage-release'
  | 'over-current-charge-trip'
  | 'over-current-discharge-trip'
  | 'over-current-retry'
  | 'over-current-lock'
  | 'over-current-unlock'
  | 'cold-charge-refusal'
  | 'cold-charge-release'
  | 'load-disconnect'
  | 'load-reconnect'
  | 'load-lost'
  | 'load-back'
  | 'charge-ended'
  | 'charge-restart'
  | 'upkeep-visit';

export interface BankEvent {
  readonly kind: BankEventKind;
  /** Seconds since the bank was put together. */
  readonly timeS: number;
  /** Number of the module, -1 for the bank as a whole. */
  readonly module: number;
  /** Number of the cell with the extreme voltage, counted through the bank; -1 where no cell caused it. */
  readonly cell: number;
}
