/** The parts of a `params.json` that are read. */
export interface OracleParameters {
  readonly case: string;
  readonly description: string;
  readonly t_end: number;
  readonly ocv: { readonly z: readonly number[]; readonly U: readonly number[] };
  readonly bms: {
    readonly ov_trip: number;
    readonly ov_release: number;
    readonly uv_trip: number;
    readonly uv_release: number;
  };
  readonly modules: readonly {
    readonly id: string;
    readonly Rp: number;
    readonly cells: readonly {
      readonly Q_Ah: number;
      readonly R0: number;
      readonly R1: number;
      readonly C1: number;
      readonly z0: number;
      readonly i_sd: number;
    }[];
  }[];
  readonly resistors: readonly { readonly id: string; readonly ohm: number }[];
  readonly sources: readonly OracleSource[];
}

export interface OracleSource {
  /** Constant current out of the bus, or constant current up to a voltage into it. */
  readonly kind: 'cc' | 'cccv';
  readonly I: number;
  readonly V?: number;
  readonly t_on: number;
  readonly t_off: number | null;
}
