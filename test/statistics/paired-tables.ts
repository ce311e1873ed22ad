/**
 * Paired tables (both, only first, only second, neither) with published intervals of the difference and tests: Newcombe
 * 1998, Stat. Med. 17, 2635-2650, method 10; Tango 1998, ibid. 891-908; Fagerland, Lydersen & Laake 2013, BMC Med. Res.
 * Methodol. 13, 91. Six digits worked anew from the formulas of the papers.
 */
export const PAIRED_TABLES = [
  {
    counts: [36, 12, 2, 0],
    d: 0.2,
    newcombe: [0.05693, 0.340428],
    tango: [0.061112, 0.344709],
    exact: 0.0129395,
    mid: 0.00738525,
  },
  {
    counts: [14, 5, 0, 22],
    d: 0.121951,
    newcombe: [0.011483, 0.226493],
    tango: [0.025836, 0.255442],
    exact: 0.0625,
    mid: 0.03125,
  },
  {
    counts: [1, 1, 7, 12],
    d: -0.285714,
    newcombe: [-0.50692, -0.025559],
    tango: [-0.517232, -0.026003],
    exact: 0.0703125,
    mid: 0.0390625,
  },
  {
    counts: [59, 6, 16, 80],
    d: -0.062112,
    newcombe: [-0.118621, -0.004625],
    tango: [-0.124023, -0.005433],
    exact: 0.0524788,
    mid: 0.0346897,
  },
  {
    counts: [794, 150, 86, 570],
    d: 0.04,
    newcombe: [0.02123, 0.058704],
    tango: [0.021362, 0.058998],
    exact: 3.71594e-5,
    mid: 2.89339e-5,
  },
] as const;
