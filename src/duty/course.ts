import type { Duty, DutySegment } from '../study/study.js';

/** One cycle of a duty. */
export interface DutyCycle {
  readonly part: string;
  readonly segments: readonly DutySegment[];
}

/** A duty unrolled up to its horizon: cycle c (from 1) is at index c - 1. Repeated cycles are the same object. */
export function dutyCourse(duty: Duty, cycles: number): readonly DutyCycle[] {
  const once = duty.parts.flatMap((part) => {
    const turn = part.cycles.map((segments): DutyCycle => ({ part: part.name, segments }));
    return Array.from({ length: part.repeat }, () => turn).flat();
  });
  return Array.from({ length: cycles }, (_, index) => once[index % once.length]);
}

/** Index of the last segment of a cycle that has load to serve, -1 if none has. */
export function lastLoadSegment(cycle: DutyCycle): number {
  return cycle.segments.findLastIndex(({ loadW, loadA }) => loadW > 0 || loadA > 0);
}
