import { z } from 'zod';

const RULE = 'a path relative to the study, with / between folders';

/** Schema of a file that a study names: portable between systems, never an absolute place of one machine. */
export const filePath = z
  .string(RULE)
  .min(1, RULE)
  .max(500, RULE)
  .regex(/^(?![/~])(?![A-Za-z]:)[^\\\p{Cc}]+$/u, RULE);
