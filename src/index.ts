/**
 * The library: read a study, simulate its banks, answer its questions. Nothing here reads or writes a file, looks at a
 * clock or keeps a state; the same study gives the same outcomes wherever its instances are simulated.
 *
 * Order of use: `readStudy`; for each candidate `prepareCandidate`, then `simulateInstance` for instances 1 to n and
 * `simulateTwin`; the rows with their `outcomeColumns` into `MemoryOutcomes`; `answerStudy`; `renderTable`.
 */

export { measureChoices } from './commands/measure-choices.js';
export type { Measure, Statistic } from './measures/measure.js';
export { MEASURES, measureNamed } from './measures/registry.js';
export { outcomeLayout } from './outcomes/block.js';
export type { ColumnValues } from './outcomes/column-values.js';
export { type OutcomeColumn, type OutcomeLayout, type OutcomeRow, outcomeColumns } from './outcomes/columns.js';
export { type CandidateOutcomes, MemoryOutcomes } from './outcomes/memory-outcomes.js';
export type { OutcomeStore } from './outcomes/outcome-store.js';
export { renderTable } from './output/table.js';
export { answerStudy } from './questions/answer-study.js';
export type * from './questions/answers.js';
export {
  type PreparedCandidate,
  prepareCandidate,
  simulateInstance,
  simulateTwin,
} from './simulation/simulate-instance.js';
export { ENGINE } from './study/engine.js';
export { type Problem, renderProblem } from './study/problem.js';
export type { ReadStudyOptions } from './study/read-options.js';
export { type ReadStudy, readStudy } from './study/read-study.js';
export type { TextOrProblem } from './study/read-text.js';
export type * from './study/study.js';
