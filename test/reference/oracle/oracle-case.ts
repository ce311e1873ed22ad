import { readFileSync } from 'node:fs';
import type { BmsSettings, Candidate, DutySegment, ModuleParameters } from '../../../src/study/study.js';
import type { Waveform } from '../contract.js';
import type { ReferenceBank } from '../reference-bank.js';
import type { EventKind, SlowEvent } from '../slow-event.js';
import type { OracleParameters, OracleSource } from './oracle-parameters.js';

export const ORACLE_CASES = ['b', 'c', 'f', 'd2'] as const;
export type OracleCase = (typeof ORACLE_CASES)[number];

/** A case as fixtures give it: the bank and what an outside program computed for it. */
export interface Oracle {
  readonly bank: ReferenceBank;
  readonly waveform: Waveform;
  readonly events: readonly SlowEvent[];
  /** When sources switch. */
  readonly phaseStartS: readonly number[];
  /** Largest source current of the run, A. */
  readonly largestBankA: number;
}

const MODULES_IN_SERIES = 2;
/** A limit that no current reaches, A. */
const UNLIMITED_A = 1e6;

export function readOracle(name: OracleCase): Oracle {
  const read = (file: string): string => readFileSync(new URL(`./${name}/${file}`, import.meta.url), 'utf8');
  const parameters: OracleParameters = JSON.parse(read('params.json'));
  const { bank, phaseStartS } = oracleBank(parameters);
  return {
    bank,
    phaseStartS,
    waveform: oracleWaveform(read('ref_waveform.csv')),
    events: oracleEvents(JSON.parse(read('events.json'))),
    largestBankA: Math.max(...parameters.sources.map((source) => source.I)),
  };
}

/** Writes an oracle's parameters down as explicit modules, a candidate and a duty of one cycle. */
function oracleBank(parameters: OracleParameters): { bank: ReferenceBank; phaseStartS: number[] } {
  const modules = parameters.modules.map((module) => oracleModule(parameters, module));
  const strings = [modules.slice(0, MODULES_IN_SERIES), modules.slice(MODULES_IN_SERIES)];
  const ohmOf = (id: string): number | null => parameters.resistors.find((resistor) => resistor.id === id)?.ohm ?? null;
  const leadOf = (id: string): number => {
    const ohm = ohmOf(id);
    if (ohm === null) throw new Error(`${parameters.case} has no resistor ${id}`);
    return ohm;
  };
  const linkOhm = ohmOf('rx');
  const charger = parameters.sources.find((source) => source.kind === 'cccv');
  const candidate: Candidate = {
    key: `oracle-${parameters.case.toLowerCase()}`,
    title: parameters.description,
    wiring: linkOhm === null ? 'strings' : 'cross-linked',
    strings: strings.map((string) => string.map((module) => module.id)),
    leads: [1, 2].map((s) => ({
      negativeOhm: leadOf(`rs${s}bot`),
      betweenOhm: leadOf(`rs${s}mid`),
      positiveOhm: leadOf(`rs${s}top`),
    })),
    linkOhm: linkOhm ?? 0,
    charger: {
      limitA: charger?.I ?? 40,
      absorptionV: charger?.V ?? 28.8,
      tailA: 0,
      tailHoldS: 120,
      absorptionS: null,
      floatV: null,
      restart: 'each-cycle',
      restartV: 0,
    },
    load: { disconnectV: null, disconnectDelayS: 10, reconnectV: 0 },
    commissioning: 'as-received',
    bleed: null,
  };
  const { segments, phaseStartS } = oracleDuty(parameters.sources, parameters.t_end);
  const ocvTable = {
    interpolation: 'linear' as const,
    chargeFraction: parameters.ocv.z,
    voltageV: parameters.ocv.U,
    slopeBelowV: null,
    slopeAboveV: null,
  };
  return {
    bank: {
      name: parameters.case,
      modules: strings,
      candidate,
      ocvTables: [ocvTable],
      cycles: [segments],
      loadFactor: 1,
      chargeFactor: 1,
    },
    phaseStartS,
  };
}

function oracleModule(parameters: OracleParameters, module: OracleParameters['modules'][number]): ModuleParameters {
  const over = <T>(of: (cell: OracleParameters['modules'][number]['cells'][number]) => T): T[] => module.cells.map(of);
  const [first] = module.cells;
  return {
    id: module.id,
    stock: 'oracle',
    ratedAh: 100,
    ocv: 0,
    hysteresisV: 0,
    hysteresisRate: 0,
    capacityAh: over((cell) => cell.Q_Ah),
    resistanceOhm: over((cell) => cell.R0),
    polarisation: [{ timeConstantS: first.R1 * first.C1, resistanceOhm: over((cell) => cell.R1) }],
    leakageA: over((cell) => cell.i_sd),
    efficiency: over(() => 1),
    arrivalCharge: over((cell) => cell.z0),
    pathResistanceOhm: module.Rp,
    standbyA: 0,
    overVoltageV: parameters.bms.ov_trip,
    overVoltageReleaseV: parameters.bms.ov_release,
    underVoltageV: parameters.bms.uv_trip,
    underVoltageReleaseV: parameters.bms.uv_release,
    overCurrentChargeA: UNLIMITED_A,
    overCurrentDischargeA: UNLIMITED_A,
    bleedA: 0,
    bleedStartV: parameters.bms.ov_trip,
    bms: ORACLE_BMS,
  };
}

/** Acts at once, drops nothing, never bleeds. */
const ORACLE_BMS: BmsSettings = {
  overVoltageDelayS: 0,
  overVoltageReleaseHoldS: 0,
  underVoltageDelayS: 0,
  underVoltageReleaseHoldS: 0,
  underVoltageReleaseOnCharge: false,
  overCurrent: {
    delayS: 10,
    opens: 'path',
    retryS: 60,
    lockAfterTrips: null,
    lockWindowS: 3600,
    lock: 'opposite-current',
  },
  forwardDropV: 0,
  recloseA: null,
  recloseDelayS: 0.1,
  bleed: { rule: 'none', when: 'always', stopBelowStartV: 0.02, deltaV: 0.01 },
  asleepA: 0,
  asleepAfterS: 86_400,
};

/** One segment for every stretch between switchings of the sources; no two sources are on at once. */
function oracleDuty(
  sources: readonly OracleSource[],
  endS: number,
): { segments: DutySegment[]; phaseStartS: number[] } {
  const edges = new Set([0, endS, ...sources.flatMap((source) => [source.t_on, source.t_off ?? endS])]);
  const ascending = [...edges].sort((a, b) => a - b);
  const phaseStartS = ascending.slice(0, -1);
  const segments = phaseStartS.map((startS, i): DutySegment => {
    const on = sources.find((source) => source.t_on <= startS && startS < (source.t_off ?? endS));
    return {
      durationS: ascending[i + 1] - startS,
      loadW: 0,
      loadA: on?.kind === 'cc' ? on.I : 0,
      chargeW: on?.kind === 'cccv' ? null : 0,
      endsWhenCharged: false,
    };
  });
  return { segments, phaseStartS };
}

function placeOf(module: string): { string: number; position: number } {
  const index = Number(module.slice(1)) - 1;
  return { string: 1 + Math.floor(index / MODULES_IN_SERIES), position: 1 + (index % MODULES_IN_SERIES) };
}

function oracleEvents(file: {
  rk4: readonly { t: number; module: string; path: string; state: number }[];
}): SlowEvent[] {
  return file.rk4.map((event) => {
    const what = event.path === 'chg' ? 'over-voltage' : 'under-voltage';
    const kind: EventKind = `${what}-${event.state === 0 ? 'trip' : 'release'}`;
    return { timeS: event.t, cycle: 1, kind, ...placeOf(event.module), cell: null };
  });
}

function oracleWaveform(csv: string): Waveform {
  const [header, ...lines] = csv.trim().split(/\r?\n/);
  const names = header.split(',');
  const rows = lines.map((line) => line.split(',').map(Number));
  const column = (name: string): number[] => {
    const at = names.indexOf(name);
    if (at < 0) throw new Error(`the waveform has no column ${name}`);
    return rows.map((row) => row[at]);
  };
  return {
    timeS: column('t_s'),
    busV: column('bus_V'),
    modules: ['m1', 'm2', 'm3', 'm4'].map((module) => ({
      ...placeOf(module),
      cells: 4,
      currentA: column(`${module}_I`),
      terminalV: column(`${module}_V`),
      lowestCharge: column(`${module}_soc_min`),
      highestCharge: column(`${module}_soc_max`),
      lowestCellV: column(`${module}_vmin`),
      highestCellV: column(`${module}_vmax`),
      chargeOpen: column(`${module}_chg`).map((closed) => closed === 0),
      dischargeOpen: column(`${module}_dsg`).map((closed) => closed === 0),
    })),
  };
}
