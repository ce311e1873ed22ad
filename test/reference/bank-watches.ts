import type { DutySegment } from '../../src/study/study.js';
import { chargingAvailable, type Evaluation, type View } from './evaluation.js';
import type { EventKind } from './slow-event.js';
import type { Watch } from './watch.js';

/** Reports an event of the bank. */
export type BankReport = (timeS: number, kind: EventKind) => void;

/** Share of the absorption voltage from which the charger counts as absorbing. */
const ABSORBING = 0.995;

/** The rules of charger and load as watches; `segment` gives the present one. */
export function bankWatches(evaluation: Evaluation, segment: () => DutySegment, report: BankReport): Watch[] {
  return [
    ...chargerWatches(evaluation, segment, report),
    ...loadWatches(evaluation, segment, report),
    ...equaliserWatches(evaluation),
  ];
}

/** Equalisers stop this far below the voltage from which they work, V per cell in series. */
const STOP_BELOW_V = 0.025;

function equaliserWatches({ bank, bankSwitches }: Evaluation): Watch[] {
  const enableV = bank.candidate.equaliser?.enableV ?? null;
  if (enableV === null) return [];
  const cells = bank.modules[0].reduce((sum, module) => sum + module.capacityAh.length, 0);
  const set = (equalising: boolean) => (): void => {
    bankSwitches.equalising = equalising;
  };
  return [
    { delayS: 0, holds: ({ busV }) => !bankSwitches.equalising && busV >= enableV, fire: set(true) },
    {
      delayS: 0,
      holds: ({ busV }) => bankSwitches.equalising && busV <= enableV - STOP_BELOW_V * cells,
      fire: set(false),
    },
  ];
}

function chargerWatches(evaluation: Evaluation, segment: () => DutySegment, report: BankReport): Watch[] {
  const switches = evaluation.bankSwitches;
  const { charger } = evaluation.bank.candidate;
  const available = (): boolean => chargingAvailable(charger, segment(), evaluation.bank.chargeFactor);
  const absorbing = (view: View): boolean =>
    !switches.chargeEnded && available() && view.busV >= ABSORBING * charger.absorptionV;
  const end = (timeS: number): void => {
    if (switches.chargeEnded) return;
    switches.chargeEnded = true;
    report(timeS, 'charge-ended');
  };
  const watches: Watch[] = [
    {
      delayS: charger.tailHoldS,
      holds: (view) => charger.tailA > 0 && absorbing(view) && view.bankA < charger.tailA,
      fire: end,
    },
    {
      delayS: 0,
      holds: (view) => switches.chargeEnded && available() && view.busV <= charger.restartV,
      fire: (timeS) => {
        switches.chargeEnded = false;
        report(timeS, 'charge-restart');
      },
    },
  ];
  if (charger.absorptionS !== null) watches.push({ delayS: charger.absorptionS, holds: absorbing, fire: end });
  return watches;
}

function loadWatches(evaluation: Evaluation, segment: () => DutySegment, report: BankReport): Watch[] {
  const switches = evaluation.bankSwitches;
  const { disconnectV, disconnectDelayS, reconnectV } = evaluation.bank.candidate.load;
  const demanded = (): boolean => {
    const demand = evaluation.demandOf(segment());
    return demand.powerW + demand.currentA > 0;
  };
  const lost = (view: View): boolean => demanded() && view.status !== 'served';
  /** A load that has been disconnected is not back until it is connected again. */
  const back = (view: View): boolean => {
    const { loadW, loadA } = segment();
    return loadW + loadA === 0 || (switches.loadConnected && view.status === 'served');
  };
  const watches: Watch[] = [
    {
      delayS: 0,
      holds: (view) => !switches.overloaded && lost(view) && view.status === 'overload',
      fire: () => {
        switches.overloaded = true;
      },
    },
    {
      delayS: 0,
      holds: (view) => switches.overloaded && (!demanded() || view.recoverable),
      fire: () => {
        switches.overloaded = false;
      },
    },
    {
      delayS: 0,
      holds: (view) => (switches.loadLost ? back(view) : lost(view)),
      fire: (timeS) => {
        switches.loadLost = !switches.loadLost;
        report(timeS, switches.loadLost ? 'load-lost' : 'load-back');
      },
    },
  ];
  if (disconnectV !== null) {
    watches.push(
      {
        delayS: disconnectDelayS,
        holds: (view) => switches.loadConnected && view.busV <= disconnectV,
        fire: (timeS) => {
          switches.loadConnected = false;
          report(timeS, 'load-disconnect');
        },
      },
      {
        delayS: disconnectDelayS,
        // A bus that nothing feeds floats at any voltage.
        holds: (view) => !switches.loadConnected && view.fed && view.busV >= reconnectV,
        fire: (timeS) => {
          switches.loadConnected = true;
          report(timeS, 'load-reconnect');
        },
      },
    );
  }
  return watches;
}
