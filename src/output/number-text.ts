/** Significant digits kept at least; far more than any estimate has, and few enough to read. */
const SIGNIFICANT_DIGITS = 7;

/**
 * The text of a number in every CSV file: plain decimals, so that no spreadsheet takes an exponent for something else.
 *
 * Whole numbers keep all their digits; others are the shortest decimal equal to the value rounded to seven significant
 * digits.
 *
 * @throws RangeError if the value is not finite: absent values are empty fields, never NaN
 */
export function numberText(value: number): string {
  if (!Number.isFinite(value)) throw new RangeError(`only finite numbers can be written, got ${value}`);
  const kept = Number.isInteger(value) ? value : Number(value.toPrecision(SIGNIFICANT_DIGITS));
  return withoutExponent(String(kept));
}

/** `1.25e-7` as `0.000000125`, `1e+21` as `1000000000000000000000`; anything else as it is. */
function withoutExponent(text: string): string {
  const [mantissa, exponentText] = text.split('e');
  if (mantissa === undefined || exponentText === undefined) return text;
  const sign = mantissa.startsWith('-') ? '-' : '';
  const [whole = '', fraction = ''] = mantissa.replace('-', '').split('.');
  const exponent = Number(exponentText);
  // JavaScript writes one digit before the point, so a negative exponent only ever adds zeros in front.
  if (exponent < 0) return `${sign}0.${'0'.repeat(-exponent - 1)}${whole}${fraction}`;
  return `${sign}${whole}${fraction.padEnd(exponent, '0')}`;
}
