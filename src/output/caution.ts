/** What everyone who reads a result must be told, in the table, the report and the help. */
export const CAUTIONS: readonly string[] = [
  'A study, not an approval.',
  'Batteries hold much energy and feed very high short-circuit currents.',
  'Fuse every string.',
  "Keep to the maker's limits of modules in series and in parallel.",
  'A BMS is the last line of protection, not a charge controller.',
  'The figures are only as good as the spreads that the study states.',
  'The local electrical code and a licensed practitioner decide.',
];
