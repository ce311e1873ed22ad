/** Resistivity of annealed copper at 20 degC, Ohm mm2/m. @see IEC 60028 */
const COPPER_OHM_MM2_PER_M = 0.017241;
/** Growth of the resistance of copper per K, of that at 20 degC. @see IEC 60028 */
const COPPER_PER_K = 0.00393;
/** Strands wind around each other and so are longer than their lead [common practice, no source; as in NEC chapter 9 table 8]. */
const STRAND_LAY = 1.02;

/**
 * Greatest resistance of flexible plain copper conductors of class 5 at 20 degC by cross-section in mm2, Ohm/m.
 *
 * @see IEC 60228 (10, 150 and 185 mm2 from memory)
 */
const CLASS_5_OHM_PER_M: ReadonlyMap<number, number> = new Map([
  [10, 1.91e-3],
  [16, 1.21e-3],
  [25, 0.78e-3],
  [35, 0.554e-3],
  [50, 0.386e-3],
  [70, 0.272e-3],
  [95, 0.206e-3],
  [120, 0.161e-3],
  [150, 0.129e-3],
  [185, 0.106e-3],
]);

/** Cross-sections of class 5 that are known here, mm2. */
export const CLASS_5_MM2: readonly number[] = [...CLASS_5_OHM_PER_M.keys()];

/** Sizes of the American wire gauge by name; those beyond 1 are called 1/0 (gauge number 0), 2/0 (-1) and so on. */
export const GAUGES = [8, 6, 4, 3, 2, 1, '1/0', '2/0', '3/0', '4/0'] as const;

export type Gauge = (typeof GAUGES)[number];

/**
 * Resistance of a copper conductor by its cross-section.
 *
 *   R / l = rho / A (1 + alpha (T - 20 degC))
 *
 * @param degC temperature of the conductor
 * @returns Ohm/m
 */
export function copperOhmPerM(areaMm2: number, degC: number): number {
  return (COPPER_OHM_MM2_PER_M / areaMm2) * warmed(degC);
}

/**
 * Resistance of a stranded copper conductor of a wire gauge, Ohm/m.
 *
 *   d = 0.127 mm 92^((36 - n) / 39),   A = pi d^2 / 4
 *
 * @see ASTM B258 (the law of the diameters)
 */
export function gaugeOhmPerM(gauge: Gauge, degC: number): number {
  const number = typeof gauge === 'number' ? gauge : 1 - Number(gauge.charAt(0));
  const diameterMm = 0.127 * 92 ** ((36 - number) / 39);
  return STRAND_LAY * copperOhmPerM((Math.PI * diameterMm * diameterMm) / 4, degC);
}

/** @returns the greatest resistance that class 5 allows, Ohm/m; undefined if it has no such cross-section here */
export function class5OhmPerM(areaMm2: number, degC: number): number | undefined {
  const at20 = CLASS_5_OHM_PER_M.get(areaMm2);
  return at20 === undefined ? undefined : at20 * warmed(degC);
}

function warmed(degC: number): number {
  return 1 + COPPER_PER_K * (degC - 20);
}
