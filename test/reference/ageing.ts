import type { ModuleAgeing } from '../../src/study/ageing-settings.js';
import type { Cell, Packs } from './packs.js';
import { STATED_K } from './present-packs.js';

/** Sums of one cell over a cycle, kept as states: throughput As, charged As and s, charge fraction s. */
const USE_OF_CELL = 4;
/** Current that counts as charging, fraction of the capacity when new per hour. */
const CHARGING_PER_H = 0.01;
const GAS_J_PER_MOL_K = 8.314;

/** A cell as it ages from cycle to cycle. */
interface Life {
  readonly cell: Cell;
  readonly offsetK: number;
  readonly newAs: number;
  /** Fractions of the capacity when new that time and cycles have taken. */
  ofTime: number;
  ofCycles: number;
  left: number;
  most: number;
  least: number;
}

/** The ageing of a bank: what its cells go through in a cycle, and what it leaves of them. */
export class SlowAgeing {
  readonly #lives: readonly Life[];
  readonly #firstState: number;
  #elapsedS = 0;
  #ambientKS = 0;

  /** @param firstState where the sums of the cells begin among the states */
  constructor(base: Packs, firstState: number) {
    this.#firstState = firstState;
    this.#lives = base.packs.flatMap((pack) =>
      pack.cells.map((cell): Life => {
        const gone = cell.ageing?.initialFadeFraction ?? 0;
        const ofTime = cell.ageing?.law === 'naumann' ? gone / 2 : 0;
        return {
          cell,
          offsetK: pack.offsetK,
          newAs: cell.capacityAs / (1 - gone),
          ofTime,
          ofCycles: gone - ofTime,
          left: 1,
          most: cell.arrivalCharge,
          least: cell.arrivalCharge,
        };
      }),
    );
  }

  get states(): number {
    return this.#lives.some(({ cell }) => cell.ageing !== null) ? USE_OF_CELL * this.#lives.length : 0;
  }

  readonly leftOf = (cell: Cell): number => this.#lives.find((life) => life.cell.at === cell.at)?.left ?? 1;

  /** Time derivatives of the sums of the cell numbered `c`, whose current is `amps`. */
  ratesInto(c: number, amps: number, charge: number, out: Float64Array): void {
    const at = this.#firstState + USE_OF_CELL * c;
    const charging = amps > (CHARGING_PER_H * this.#lives[c].newAs) / 3600;
    out[at] = Math.abs(amps);
    out[at + 1] = charging ? amps : 0;
    out[at + 2] = charging ? 1 : 0;
    out[at + 3] = charge;
  }

  /** After a step of `stepS` seconds at an ambient. */
  afterStep(states: Float64Array, stepS: number, ambientK: number): void {
    this.#elapsedS += stepS;
    this.#ambientKS += ambientK * stepS;
    for (const life of this.#lives) {
      life.most = Math.max(life.most, states[life.cell.at]);
      life.least = Math.min(life.least, states[life.cell.at]);
    }
  }

  /** Ages every cell by the cycle that has ended, and begins another. */
  afterCycle(states: Float64Array): void {
    const meanK = this.#elapsedS > 0 ? this.#ambientKS / this.#elapsedS : STATED_K;
    this.#lives.forEach((life, c) => {
      const { cell, newAs } = life;
      const at = this.#firstState + USE_OF_CELL * c;
      const [throughputAs, chargedAs, chargedS, chargeS] = states.subarray(at, at + USE_OF_CELL);
      if (cell.ageing !== null) {
        age(life, cell.ageing, {
          kelvin: meanK + life.offsetK,
          seconds: this.#elapsedS,
          cycles: throughputAs / 2 / newAs,
          meanCharge: chargeS / this.#elapsedS,
          perHour: chargedS > 0 ? (3600 * chargedAs) / chargedS / newAs : 0,
          depth: life.most - life.least,
        });
      }
      life.most = states[cell.at];
      life.least = states[cell.at];
      states.fill(0, at, at + USE_OF_CELL);
    });
    this.#elapsedS = 0;
    this.#ambientKS = 0;
  }
}

interface Use {
  readonly kelvin: number;
  readonly seconds: number;
  readonly cycles: number;
  readonly meanCharge: number;
  readonly perHour: number;
  readonly depth: number;
}

/**
 * Fade by throughput (Wang et al., J. Power Sources 196 (2011) 3942, the fit at C/2 of a 2.2 Ah cell), or by time and
 * cycles (Naumann et al., J. Energy Storage 17 (2018) 153 and J. Power Sources 451 (2020) 227666).
 */
function age(life: Life, { law, rate, initialFadeFraction }: ModuleAgeing, use: Use): void {
  if (law === 'wang-2011') {
    const factor = (30330 / 100) * Math.exp(-31500 / GAS_J_PER_MOL_K / use.kelvin);
    life.ofCycles = further(life.ofCycles, rate * factor, 0.552, 2.2 * use.cycles);
  } else {
    const warm = Math.exp((17126 / GAS_J_PER_MOL_K) * (1 / STATED_K - 1 / use.kelvin));
    const full = Math.max(0, Math.min(use.meanCharge, 1));
    const ofTime = 1.2571e-5 * warm * (2.8575 * (full - 0.5) ** 3 + 0.60225);
    const deep = 4.0253 * (Math.min(use.depth, 1) - 0.6) ** 3 + 1.0923;
    const ofCycles = ((0.063 * use.perHour + 0.0971) * deep) / 100;
    life.ofTime = further(life.ofTime, rate * ofTime, 0.5, use.seconds);
    life.ofCycles = further(life.ofCycles, rate * ofCycles, 0.5, use.cycles);
  }
  life.left = Math.min(life.left, (1 - Math.min(0.8, life.ofTime + life.ofCycles)) / (1 - initialFadeFraction));
}

/** Goes on along f = k x^p from where it reaches the present fade. */
function further(fade: number, k: number, p: number, more: number): number {
  if (k <= 0 || more <= 0) return fade;
  const reached = (fade / k) ** (1 / p);
  return Math.max(fade, k * (reached + more) ** p);
}
