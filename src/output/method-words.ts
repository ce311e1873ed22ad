import type { ComparisonRow, SummaryRow } from '../questions/answers.js';

type MethodName = Exclude<SummaryRow['method'] | ComparisonRow['test'], ''>;

/** What stands behind the names in the columns `method` and `test`, with the source. */
export const METHOD_WORDS: Readonly<Record<MethodName, string>> = {
  wilson:
    'Score interval of a proportion (Wilson 1927): covers 95 % on average over all shares, at the worst of them 93.7 % of 512 banks.',
  'clopper-pearson':
    'Exact interval of a proportion (Clopper & Pearson 1934); used where fewer than five banks had the event or fewer than five had not.',
  'student-t':
    "Mean with Student's t interval over the banks (Student 1908); covers less than it says where few banks differ from the others, which the note then says.",
  'block-t':
    "Mean with Student's t interval over blocks of banks, as a ratio of block totals (Cochran 1977); at least 8 blocks, for shares 16 blocks with 5 events and 5 others each on average.",
  'order-statistics':
    'Interval of a quantile between two order statistics by binomial ranks, valid for any law (David & Nagaraja 2003, 7.1).',
  'product-limit-wilson':
    "Product-limit estimate (Kaplan & Meier 1958), score interval with as many banks as give Greenwood's variance (Rothman 1978), at one cycle by itself.",
  'product-limit-beta':
    'Product-limit estimate, exact interval with that number of banks where fewer than five had the event or fewer than five had not.',
  'newcombe-10': 'Difference of two proportions on the same banks (Newcombe 1998, method 10).',
  tango: 'Difference of two proportions on the same banks, score interval (Tango 1998).',
  'paired-t': "Mean of differences bank by bank, Student's t.",
  'paired-block-t': "Mean of differences bank by bank, Student's t over blocks of banks.",
  'mcnemar-exact': 'Exact binomial test of the banks in which only one of two candidates has the event (McNemar 1947).',
};

/** What holds for every figure of a run. */
export const CONVENTIONS: readonly string[] = [
  'Intervals are two-sided with the confidence stated, each by itself unless a column says simultaneous.',
  'Quantiles interpolate between order statistics (definition 7 of Hyndman & Fan 1996).',
  'Banks are paired by their number in comparisons; differences are candidate less reference.',
  'Rates are means of the rates of single banks.',
  'An acceptance line meets or fails where the whole interval lies on one side of it; only one end decides, at half of the rest.',
];
