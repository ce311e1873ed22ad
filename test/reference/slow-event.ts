/** Everything that switches for good reason in a bank. */
export type EventKind =
  | 'over-voltage-trip'
  | 'over-voltage-release'
  | 'under-voltage-trip'
  | 'under-voltage-release'
  | 'over-current-charge-trip'
  | 'over-current-discharge-trip'
  | 'over-current-retry'
  | 'over-current-lock'
  | 'load-disconnect'
  | 'load-reconnect'
  | 'load-lost'
  | 'load-back'
  | 'charge-ended'
  | 'charge-restart'
  | 'cold-charge-refusal'
  | 'cold-charge-release';

/** Strings, positions, cells and cycles count from 1; null where the event is the bank's or no single cell's. */
export interface SlowEvent {
  readonly timeS: number;
  readonly cycle: number;
  readonly kind: EventKind;
  readonly string: number | null;
  readonly position: number | null;
  readonly cell: number | null;
}
