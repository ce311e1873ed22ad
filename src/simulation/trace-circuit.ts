import type { Bank } from '../bank/bank.js';
import { copyBankState } from '../bank/bank-state.js';
import type { BankCircuit, DemandChange } from '../bank/circuit.js';
import {
  carriedBank,
  carriedCharger,
  carriedLoad,
  forgetLeftOut,
  leftOutOf,
  type Stretch,
} from '../bank/circuit-scope.js';
import type { BankEvent } from '../bank/events.js';
import { REFERENCE_K } from '../bank/temperature.js';
import { wireCandidate } from '../bank/wiring-graph.js';
import type { DutyCycle } from '../duty/course.js';
import type { Candidate } from '../study/study.js';
import type { Journey } from './advance.js';
import { createClimate } from './climate.js';
import { cellVoltageV } from './kernel.js';
import { stopClocks } from './watch.js';

/** Writes down a stretch of a journey as a circuit: where it starts and what is asked of it. */
export interface CircuitTracer {
  /** To be called when a cycle begins. */
  readonly onCycle: () => void;
  /** To be called with every event. */
  readonly onEvent: (event: BankEvent) => void;
  /** To be called with every step before it is committed. */
  readonly onStep: () => void;
  /** @returns the circuit of what has passed since the tracer was made */
  readonly finish: () => BankCircuit;
}

/**
 * @param candidate whose bank is on its journey
 * @param cycles of the stretch that follows
 */
export function createCircuitTracer(
  journey: Journey,
  candidate: Candidate,
  cycles: readonly DutyCycle[],
): CircuitTracer {
  const { kernel, terminal } = journey;
  const { charging, loadConnected } = terminal;
  const startState = copyBankState(kernel.bank, kernel.state);
  const startS = kernel.nowS;
  const ambients = new Set(cycles.flatMap(({ segments }) => segments.map(({ ambientK }) => ambientK ?? REFERENCE_K)));
  const stretch: Stretch = {
    cycles: cycles.length,
    ambientChanges: ambients.size > 1,
    hasUpkeep: candidate.upkeep !== undefined,
  };
  const leftOut = leftOutOf(kernel.bank, candidate.charger, candidate.load, stretch);
  const demand: DemandChange[] = [];
  const cycleStartS: number[] = [];
  let first: FirstStep | null = null;
  let chargedS = Number.NaN;
  return {
    onCycle: () => cycleStartS.push(kernel.nowS),
    onEvent: ({ kind, timeS }) => {
      if (kind === 'charge-ended') chargedS = timeS;
    },
    onStep: () => {
      first ??= firstStep(journey);
      const { demandW: loadW, demandA: loadA, chargeW } = terminal;
      const last = demand.at(-1);
      if (last?.loadW === loadW && last.loadA === loadA && last.chargeW === chargeW) return;
      demand.push({ atS: kernel.nowS, loadW, loadA, chargeW, afterCharge: kernel.nowS === chargedS });
    },
    finish: () => {
      const { tooCold, ...begun } = first ?? firstStep(journey);
      return {
        ...begun,
        graph: wireCandidate(candidate),
        state: { ...startState, tooCold },
        charger: candidate.charger,
        load: candidate.load,
        charging,
        loadConnected,
        startS,
        endS: kernel.nowS,
        demand,
        cycleStartS,
        leftOut,
      };
    },
  };
}

interface FirstStep {
  readonly bank: Bank;
  readonly tooCold: Uint8Array;
  readonly stackV: Float64Array;
  readonly busV: number;
}

/** What only the first segment brings: the bank at its ambient, and voltages. */
function firstStep({ kernel }: Journey): FirstStep {
  const { bank, bus, state } = kernel;
  const stackV = new Float64Array(bank.modules);
  for (let c = 0; c < bank.cells; c++) {
    stackV[bank.moduleOfCell[c]] += cellVoltageV(kernel, c, bus.currentA, state.filterA);
  }
  return { bank, tooCold: Uint8Array.from(state.tooCold), stackV, busV: bus.bankV };
}

/**
 * Goes on without what a circuit leaves out (`LeftOut`), from where the bank stands now. To be followed by the first segment
 * of a cycle, which settles it.
 */
export function leaveOut(journey: Journey): void {
  const { kernel, terminal, watch, climate } = journey;
  // The next segment puts this bank, at its ambient, in the place of the present one.
  journey.climate = createClimate(carriedBank(climate?.reference ?? kernel.bank));
  journey.ageing = null;
  terminal.charger = carriedCharger(terminal.charger);
  terminal.load = carriedLoad(terminal.load);
  forgetLeftOut(kernel.state);
  stopClocks(watch);
}

/** The cycles with the ambient of their first segment throughout. */
export function withoutAmbientCourse(cycles: readonly DutyCycle[]): readonly DutyCycle[] {
  const ambientK = cycles[0]?.segments[0]?.ambientK;
  return cycles.map((cycle) => ({
    ...cycle,
    segments: cycle.segments.map(({ ambientK: _, ...segment }) =>
      ambientK === undefined ? segment : { ...segment, ambientK },
    ),
  }));
}
