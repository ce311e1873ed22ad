/** Grades of a stock: how alike its modules are expected to be. */
export const GRADES = ['new-same-make', 'mixed-purchase', 'older'] as const;

export type Grade = (typeof GRADES)[number];

/** Grade of a stock that names none. */
export const DEFAULT_GRADE: Grade = 'new-same-make';
