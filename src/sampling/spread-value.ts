/**
 * Value of a spread quantity: nominal x (1 + deviation) if the spread is relative, else nominal + deviation.
 *
 * @param deviation all levels together: a fraction if the spread is relative, else in the unit of the nominal value
 */
export function spreadValue(
  spread: { readonly nominal: number; readonly relative: boolean },
  deviation: number,
): number {
  return spread.relative ? spread.nominal * (1 + deviation) : spread.nominal + deviation;
}
