import type { Answers } from '../questions/answers.js';
import type { Study } from '../study/study.js';
import { byCycleColumns } from './by-cycle-csv.js';
import { CAUTIONS } from './caution.js';
import { comparisonColumns } from './comparisons-csv.js';
import { namedEnough } from './named-enough.js';
import { namedRows } from './result-column.js';
import { summaryColumns } from './summary-csv.js';

/**
 * All answers as one JSON document, the twin of the table, with the names of the CSV files. ASCII only: other
 * characters are escaped, so that nothing in a title reaches a terminal as a control character.
 *
 * @returns text with a line end
 */
export function renderJson(answers: Answers, study: Study): string {
  const { confidencePercent } = answers;
  const document = {
    title: study.title,
    seed: study.seed,
    instances: answers.instances,
    instances_of_study: study.instances,
    cycles: study.cycles,
    confidence_percent: confidencePercent,
    verdict_confidence_percent: answers.verdictConfidencePercent,
    enough: namedEnough(answers),
    reference: study.reference,
    candidates: study.candidates.map(({ key, title, wiring }) => ({ candidate: key, title, wiring })),
    verdicts: answers.verdicts.map(({ candidate, verdict, lines }) => ({
      candidate,
      verdict,
      lines: lines.map(({ line, verdict: ofLine, wouldDecide, least }) => ({
        measure: line.measure,
        statistic: line.statistic,
        bound: line.bound.replace('-', '_'),
        limit: line.limit,
        verdict: ofLine,
        would_decide: wouldDecide,
        least_banks: least === null ? null : least.banks,
      })),
    })),
    summary: namedRows(summaryColumns(confidencePercent), answers.summary),
    comparisons: namedRows(comparisonColumns(confidencePercent), answers.comparisons),
    by_cycle: namedRows(byCycleColumns(confidencePercent), answers.byCycle),
    hardest_case:
      answers.hardestCase === null
        ? null
        : {
            candidate: answers.hardestCase.candidate,
            instance: answers.hardestCase.instance,
            lost_capacity_percent: answers.hardestCase.lostCapacityPercent,
            load_lost_days: answers.hardestCase.loadLostCycles,
          },
    cautions: CAUTIONS,
  };
  return `${JSON.stringify(document, null, 1).replace(/[^\n -~]/gu, escaped)}\n`;
}

/** JSON escapes of every UTF-16 unit of a character. */
function escaped(character: string): string {
  return character
    .split('')
    .map((unit) => `\\u${unit.charCodeAt(0).toString(16).padStart(4, '0')}`)
    .join('');
}
