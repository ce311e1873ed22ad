/** How an interval was made; part of what a run leaves. */
export type Method =
  | 'wilson'
  | 'clopper-pearson'
  | 'student-t'
  | 'block-t'
  | 'order-statistics'
  | 'product-limit-wilson'
  | 'product-limit-beta'
  | 'newcombe-10'
  | 'tango'
  | 'paired-t'
  | 'paired-block-t';
