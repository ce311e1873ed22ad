import type { BankCircuit } from '../bank/circuit.js';
import type { LeftOut } from '../bank/circuit-scope.js';
import { numberText } from './number-text.js';
import { asciiText, wrapText } from './plain-text.js';
import { LEAST_PATH_OHM } from './spice-modules.js';
import { CHARGER_DECIDES_S } from './spice-terminal.js';

/** Where the bank of a deck comes from, so that it can be found and made again. */
export interface DeckAddress {
  /** As named on the command line. */
  readonly source: string;
  readonly title: string;
  readonly seed: string;
  readonly candidate: string;
  readonly instance: number;
  readonly fromCycle: number;
  readonly toCycle: number;
  readonly everyS: number;
  readonly likeForLike: boolean;
  readonly version: string;
  readonly engine: number;
  readonly node: string;
  readonly simulationKey: string;
}

const LEFT_OUT: Readonly<Record<LeftOut, string>> = {
  bleed: 'bleed of the cells: none',
  'bms-delays': 'delays of trip, release and reclosing: a BMS acts at once',
  'over-current': 'over-current protection, with its retries and locks: none, and none in force at the start',
  'standby-sleep': 'sleep of a BMS whose discharge path stays open: its standby current goes on',
  'tail-hold': 'time for which the tail has to last: charging ends as soon as the tail is reached',
  'absorption-time': 'longest time at absorption: charging ends by its tail alone',
  'disconnect-delay': 'delay of the low-voltage disconnect: it acts at once',
  'ambient-course': 'course of ambient: that of the first instant holds throughout',
  ageing: 'ageing between the cycles of the window: cells stay as they are at its start',
  visits: 'visits within the window: nobody comes',
};

/** The comments at the head of a deck; the first line, which a simulator takes as the title, included. */
export function deckHead(circuit: BankCircuit, address: DeckAddress): readonly string[] {
  const { candidate, instance, fromCycle, toCycle } = address;
  const items = (list: readonly string[]): string[] => list.flatMap((item) => comment(item, '- '));
  return [
    `* motleybank: ${asciiText(address.title)}, candidate ${candidate}, sampled bank ${instance}, cycles ${fromCycle} to ${toCycle}`,
    ...items([
      `study ${asciiText(address.source)}, seed ${asciiText(address.seed)}`,
      `simulation key ${address.simulationKey}`,
      `motleybank ${address.version}, engine ${address.engine}, Node ${address.node}`,
      `made by: motleybank trace ${asciiText(address.source)} --candidate ${candidate} --instance ${instance} --from-cycle ${fromCycle} --to-cycle ${toCycle} --every ${numberText(address.everyS)} --netlist FILE${address.likeForLike ? ' --like-for-like' : ''}`,
    ]),
    '*',
    ...comment(
      `Time 0 is time_s ${circuit.startS} of the trace. Current is positive where it charges. Nodes: sSpP_i current of the module in string S at position P in A (in volts, as all that follows), sSpP_v its voltage, sSpP_vmax and sSpP_vmin its highest and lowest cell, sSpP_chg and sSpP_dsg its paths (1 = closed), sSpPcK_z the charge fraction of its cell K; bus, bank_i, load_i, charger_i; load_off and ended 1 while the low-voltage disconnect is open, and while the charger has ended.`,
    ),
    '*',
    ...comment(leftOutTitle(circuit, address)),
    ...items(circuit.leftOut.map((what) => LEFT_OUT[what])),
    ...comment('Otherwise than in the trace:'),
    ...items(differences(circuit)),
  ];
}

function leftOutTitle({ leftOut }: BankCircuit, { likeForLike }: DeckAddress): string {
  if (leftOut.length === 0) return 'Left out: nothing.';
  return likeForLike
    ? 'Left out here, and in the trace from the start of the window on (--like-for-like):'
    : 'Left out here, but not in the trace (--like-for-like leaves it out there too):';
}

/** What stands for something else, be it ever so little. */
function differences({ bank, demand }: BankCircuit): readonly string[] {
  const list = [
    'a charger that holds a voltage has 10 uOhm, the bus 1 uS per string and 10 mF to minus, each module 1 mF',
    'demand changes within 0.2 s, a path opens or closes within 0.1 s; rectifiers are rounded within 10 uV',
    'a load gives way below 1 V per cell: where the trace has it lost, it draws what little the bus has',
    'the bus, once every path is open, is at no certain voltage',
  ];
  if (demand.some(({ afterCharge }) => afterCharge)) {
    list.push(
      `what follows the end of charge follows that of the deck, if it is within ${CHARGER_DECIDES_S} s of that of the trace`,
    );
  }
  if (bank.pathOhm.some((ohm) => ohm < LEAST_PATH_OHM)) {
    list.push('a BMS path without resistance has 10 uOhm');
  }
  return list;
}

function comment(text: string, mark = ''): readonly string[] {
  const others = `* ${' '.repeat(mark.length)}`;
  return wrapText(text, 120, { first: `* ${mark}`, others });
}
