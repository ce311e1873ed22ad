export { EXIT_STATUS, type ExitStatus } from './commands/exit-status.js';
export { type RunOptions, runCommand } from './commands/run.js';
export type { Shell } from './commands/shell.js';
export type { ColumnValues } from './outcomes/column-values.js';
export type { OutcomeColumn, OutcomeRow } from './outcomes/columns.js';
export { type CandidateOutcomes, MemoryOutcomes } from './outcomes/memory-outcomes.js';
export type { OutcomeStore } from './outcomes/outcome-store.js';
