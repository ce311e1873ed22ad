/** What fixes the results beside the study: with the same, a run leaves the same bytes. */
export interface Provenance {
  readonly engine: number;
  readonly nodeMajor: number;
  /** As Node names it, e.g. `x64`. */
  readonly architecture: string;
}
