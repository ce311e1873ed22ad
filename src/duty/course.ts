import type { Duty, DutySegment } from '../study/study.js';

/** One cycle of a duty. */
export interface DutyCycle {
  readonly part: string;
  readonly segments: readonly DutySegment[];
}

/**
 * A duty unrolled up to its horizon: cycle c (from 1) is at index c - 1. Repeated cycles are the same object, and nothing
 * beyond the horizon is unrolled: parts may be repeated for centuries.
 */
export function dutyCourse({ parts }: Duty, cycles: number): readonly DutyCycle[] {
  const turns = parts.map((part) => part.cycles.map((segments): DutyCycle => ({ part: part.name, segments })));
  const course: DutyCycle[] = [];
  while (course.length < cycles) {
    for (const [index, { repeat }] of parts.entries()) {
      for (let time = 0; time < repeat && course.length < cycles; time++) {
        for (const cycle of turns[index]) course.push(cycle);
      }
    }
  }
  course.length = cycles;
  return course;
}

/** Index of the last segment of a cycle that has load to serve, -1 if none has. */
export function lastLoadSegment(cycle: DutyCycle): number {
  return cycle.segments.findLastIndex(({ loadW, loadA }) => loadW > 0 || loadA > 0);
}
