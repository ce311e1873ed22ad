/** Laws by which cells lose capacity. */
export const AGEING_LAWS = ['wang-2011', 'naumann'] as const;

/** How the cells of a stock age; capacity and resistance of the study are those at its start. */
export interface AgeingSettings {
  readonly law: (typeof AGEING_LAWS)[number];
  /** Share of the capacity when new that is gone at the start: where on its curve a cell stands. */
  readonly initialFadeFraction: number;
  /** Growth of the cell resistances per loss of capacity, both as shares of what they are at the start. */
  readonly resistanceGrowth: number;
}

/** How the cells of one module age. */
export interface ModuleAgeing extends AgeingSettings {
  /** Factor on the fade that the law gives. */
  readonly rate: number;
}
