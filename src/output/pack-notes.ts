import type { Answers } from '../questions/answers.js';
import { wrapText } from './plain-text.js';

const MEANING = {
  're-housed, not a product': 'the cells of its modules in packs with one BMS each',
  'different purchase': 'packs bought as such, of a lot of their own',
} as const;

/** @returns a line below the table for each candidate of packs that is no like-for-like purchase */
export function renderPackNotes({ packs }: Pick<Answers, 'packs'>): readonly string[] {
  return packs.flatMap(({ candidate, kind }) => wrapText(`${candidate}: ${kind} (${MEANING[kind]})`));
}
