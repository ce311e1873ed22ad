import type { MeasureChoice } from './acceptance.js';
import type { ReadText } from './read-text.js';

/** Values of the command line that stand over those of the study file. */
export interface Overrides {
  readonly seed?: string | undefined;
  readonly instances?: number | undefined;
}

export interface ReadStudyOptions {
  /** Name of the file in messages, and the title of a study without one. */
  readonly fileName: string;
  /** Reads a file that the study names, its path as written there. */
  readonly readText: ReadText;
  /** What acceptance lines may name. */
  readonly measures: readonly MeasureChoice[];
  readonly overrides?: Overrides | undefined;
}
