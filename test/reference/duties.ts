import type { DutySegment } from '../../src/study/study.js';

/** A segment from what differs from an idle hour. */
export function segmentOf(hours: number, sketch: Partial<DutySegment> = {}): DutySegment {
  return { durationS: 3600 * hours, loadW: 0, loadA: 0, chargeW: 0, endsWhenCharged: false, ...sketch };
}

/** 250 W per module of four cells for 3.2 h, an hour's rest, charge to the end or 6 h, an hour's rest. */
export function referenceDuty(modulesOfFour: number): DutySegment[] {
  return [
    segmentOf(3.2, { loadW: 250 * modulesOfFour }),
    segmentOf(1),
    segmentOf(6, { chargeW: null, endsWhenCharged: true }),
    segmentOf(1),
  ];
}

/** A clear and a dull day by the hour, W per module of four cells; charge and load overlap. Invented. */
const DAYS = [
  { loadW: [15, 15, 60, 110, 40, 30, 150, 70], chargeW: [0, 0, 30, 180, 260, 120, 0, 0] },
  { loadW: [15, 15, 70, 120, 60, 40, 170, 90], chargeW: [0, 0, 10, 40, 60, 20, 0, 0] },
];

/** Days of eight rows of three hours. */
export function profileDays(modulesOfFour: number, days: readonly ('clear' | 'dull')[]): DutySegment[][] {
  return days.map((day) => {
    const { loadW, chargeW } = DAYS[day === 'clear' ? 0 : 1];
    return loadW.map((load, row) =>
      segmentOf(3, { loadW: load * modulesOfFour, chargeW: chargeW[row] * modulesOfFour }),
    );
  });
}

/** The same cycle several times. */
export function repeated(cycle: readonly DutySegment[], times: number): DutySegment[][] {
  return Array.from({ length: times }, () => [...cycle]);
}
