import type { PackView, View } from './evaluation.js';
import type { Pack } from './packs.js';
import type { EventKind } from './slow-event.js';
import { chargeOpen, dischargeOpen, type OverCurrentState, type PackSwitches } from './switches.js';
import type { Watch } from './watch.js';

/** Reports an event of a pack; `cell` counts from 1. */
export type PackReport = (timeS: number, kind: EventKind, cell: number | null) => void;

/** Current that counts as flowing, A. */
const FLOWING_A = 0.01;

/** The rules of one BMS as watches. `k` is the place of the pack in a view. */
export function bmsWatches(pack: Pack, k: number, switches: PackSwitches, report: PackReport): Watch[] {
  return [
    ...voltageWatches(pack, k, switches, report),
    ...overCurrentWatches(pack, k, switches, 'charge', report),
    ...overCurrentWatches(pack, k, switches, 'discharge', report),
    ...pathWatches(pack, k, switches),
    ...bleedWatches(pack, k, switches),
  ];
}

function voltageWatches(pack: Pack, k: number, switches: PackSwitches, report: PackReport): Watch[] {
  const { module, bms } = pack;
  const at = (view: View): PackView => view.packs[k];
  return [
    {
      delayS: bms.overVoltageDelayS,
      holds: (view) => !switches.overVoltage && at(view).highestV >= module.overVoltageV,
      fire: (timeS, view) => {
        switches.overVoltage = true;
        report(timeS, 'over-voltage-trip', 1 + at(view).cellV.indexOf(at(view).highestV));
      },
    },
    {
      delayS: bms.overVoltageReleaseHoldS,
      holds: (view) => switches.overVoltage && at(view).highestV <= module.overVoltageReleaseV,
      fire: (timeS) => {
        switches.overVoltage = false;
        report(timeS, 'over-voltage-release', null);
      },
    },
    {
      delayS: bms.underVoltageDelayS,
      holds: (view) => !switches.underVoltage && at(view).lowestV <= module.underVoltageV,
      fire: (timeS, view) => {
        switches.underVoltage = true;
        report(timeS, 'under-voltage-trip', 1 + at(view).cellV.indexOf(at(view).lowestV));
      },
    },
    {
      delayS: bms.underVoltageReleaseHoldS,
      holds: (view) =>
        switches.underVoltage &&
        at(view).lowestV >= module.underVoltageReleaseV &&
        (!bms.underVoltageReleaseOnCharge || at(view).currentA > FLOWING_A),
      fire: (timeS) => {
        switches.underVoltage = false;
        report(timeS, 'under-voltage-release', null);
      },
    },
  ];
}

function overCurrentWatches(
  pack: Pack,
  k: number,
  switches: PackSwitches,
  direction: 'charge' | 'discharge',
  report: PackReport,
): Watch[] {
  const settings = pack.bms.overCurrent;
  const guard: OverCurrentState = switches.overCurrent[direction];
  const sign = direction === 'charge' ? 1 : -1;
  const limitA = direction === 'charge' ? pack.module.overCurrentChargeA : pack.module.overCurrentDischargeA;
  const close = (timeS: number): void => {
    guard.open = false;
    report(timeS, 'over-current-retry', null);
  };
  return [
    {
      delayS: settings.delayS,
      holds: (view) => !guard.open && sign * view.packs[k].currentA >= limitA,
      fire: (timeS) => {
        guard.open = true;
        guard.tripsS = [...guard.tripsS.filter((tripS) => tripS > timeS - settings.lockWindowS), timeS];
        report(timeS, `over-current-${direction}-trip`, null);
        if (settings.lockAfterTrips !== null && guard.tripsS.length >= settings.lockAfterTrips) {
          guard.locked = true;
          report(timeS, 'over-current-lock', null);
        }
      },
    },
    { delayS: settings.retryS, holds: () => guard.open && !guard.locked, fire: close },
    {
      delayS: 0,
      holds: (view) =>
        guard.locked && settings.lock === 'opposite-current' && -sign * view.packs[k].currentA > FLOWING_A,
      fire: (timeS) => {
        guard.locked = false;
        guard.tripsS = [];
        close(timeS);
      },
    },
  ];
}

/** The forward drop of a one-way path, and sleep. */
function pathWatches(pack: Pack, k: number, switches: PackSwitches): Watch[] {
  const { bms } = pack;
  const { opens } = bms.overCurrent;
  /** Current the permitted way; null unless exactly one path is open. */
  const permittedA = (view: View): number | null => {
    const noCharge = chargeOpen(switches, opens);
    if (noCharge === dischargeOpen(switches, opens)) return null;
    return noCharge ? -view.packs[k].currentA : view.packs[k].currentA;
  };
  return [
    {
      delayS: bms.recloseDelayS,
      holds: (view) => {
        const currentA = permittedA(view);
        return !switches.reclosed && bms.recloseA !== null && currentA !== null && currentA > bms.recloseA;
      },
      fire: () => {
        switches.reclosed = true;
      },
    },
    {
      delayS: 0,
      holds: (view) => switches.reclosed && (permittedA(view) ?? 0) <= 0,
      fire: () => {
        switches.reclosed = false;
      },
    },
    {
      delayS: bms.asleepAfterS,
      holds: () => !switches.asleep && dischargeOpen(switches, opens),
      fire: () => {
        switches.asleep = true;
      },
    },
    {
      delayS: 0,
      holds: () => switches.asleep && !dischargeOpen(switches, opens),
      fire: () => {
        switches.asleep = false;
      },
    },
  ];
}

function bleedWatches(pack: Pack, k: number, switches: PackSwitches): Watch[] {
  const { rule, when, stopBelowStartV, deltaV } = pack.bms.bleed;
  if (rule === 'none') return [];
  const startV = pack.bleedStartV;
  const allowed = (view: PackView): boolean => when === 'always' || view.currentA > FLOWING_A;
  return pack.cells.flatMap((_, c): Watch[] => [
    {
      delayS: 0,
      holds: ({ packs: { [k]: view } }) =>
        !switches.bleeding[c] &&
        allowed(view) &&
        view.cellV[c] >= startV &&
        (rule === 'each' || view.cellV[c] - view.lowestV >= deltaV),
      fire: () => {
        switches.bleeding[c] = true;
      },
    },
    {
      delayS: 0,
      holds: ({ packs: { [k]: view } }) =>
        switches.bleeding[c] &&
        (!allowed(view) ||
          view.cellV[c] <= startV - stopBelowStartV ||
          (rule === 'above-lowest' && view.cellV[c] - view.lowestV <= deltaV / 2)),
      fire: () => {
        switches.bleeding[c] = false;
      },
    },
  ]);
}
