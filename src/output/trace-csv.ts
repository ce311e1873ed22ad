import type { Bank } from '../bank/bank.js';
import { type CsvField, renderCsv } from './csv.js';

/** One module at one instant, as far as the file shows it. */
export interface TracedModule {
  readonly string: number;
  readonly position: number;
  readonly currentA: number;
  readonly terminalV: number;
  readonly charge: readonly number[];
  readonly cellV: readonly number[];
  readonly bleeding: readonly boolean[];
  readonly chargeOpen: boolean;
  readonly dischargeOpen: boolean;
  readonly temperatureK: number;
  readonly deviceA: number | null;
}

/** What of a bank there is to be shown beside what every bank has. */
export interface TracedOptions {
  /** Some module may have another temperature than 25 degC. */
  readonly temperature: boolean;
  readonly equaliser: boolean;
}

export interface TracedInstant {
  readonly cycle: number;
  readonly timeS: number;
  readonly busV: number;
  readonly bankA: number;
  readonly demandW: number;
  readonly servedW: number;
  readonly modules: readonly TracedModule[];
}

export interface TracedEvent {
  readonly cycle: number;
  readonly timeS: number;
  readonly kind: string;
  /** Numbers within the bank, -1 for none. */
  readonly module: number;
  readonly cell: number;
}

const CELSIUS_ZERO_K = 273.15;

interface Column<Row> {
  readonly name: string;
  readonly value: (row: Row) => CsvField;
  /** Left out if false. */
  readonly shown?: boolean;
}

/** `bus.csv`: the bank as a whole, one row per instant. */
export function renderBusCsv(instants: readonly TracedInstant[]): Promise<string> {
  return render(instants, [
    { name: 'cycle', value: ({ cycle }) => cycle },
    { name: 'time_s', value: ({ timeS }) => timeS },
    { name: 'bus_V', value: ({ busV }) => busV },
    { name: 'bank_A', value: ({ bankA }) => bankA },
    { name: 'demand_W', value: ({ demandW }) => demandW },
    { name: 'served_W', value: ({ servedW }) => servedW },
  ]);
}

/**
 * `modules.csv`: one row per instant and module; charge and voltage of its extreme cells. `equaliser_A` is what the device
 * between this module and the next takes, from the next one if positive; empty at the last position.
 */
export function renderModulesCsv(instants: readonly TracedInstant[], options: TracedOptions): Promise<string> {
  const rows = instants.flatMap((instant) => instant.modules.map((module) => ({ instant, module })));
  const path = (open: boolean): string => (open ? 'open' : 'closed');
  return render(rows, [
    { name: 'cycle', value: ({ instant }) => instant.cycle },
    { name: 'time_s', value: ({ instant }) => instant.timeS },
    { name: 'string', value: ({ module }) => module.string },
    { name: 'position', value: ({ module }) => module.position },
    { name: 'current_A', value: ({ module }) => module.currentA },
    { name: 'module_V', value: ({ module }) => module.terminalV },
    { name: 'lowest_charge_percent', value: ({ module }) => 100 * Math.min(...module.charge) },
    { name: 'highest_charge_percent', value: ({ module }) => 100 * Math.max(...module.charge) },
    { name: 'lowest_cell_V', value: ({ module }) => Math.min(...module.cellV) },
    { name: 'highest_cell_V', value: ({ module }) => Math.max(...module.cellV) },
    { name: 'charge_path', value: ({ module }) => path(module.chargeOpen) },
    { name: 'discharge_path', value: ({ module }) => path(module.dischargeOpen) },
    { name: 'bleeding_cells', value: ({ module }) => module.bleeding.filter(Boolean).length },
    { name: 'module_degC', shown: options.temperature, value: ({ module }) => degC(module.temperatureK) },
    { name: 'equaliser_A', shown: options.equaliser, value: ({ module }) => module.deviceA },
  ]);
}

/** `events.csv`: what happened, in order; string, position and cell count from 1 and are empty for the bank. */
export function renderEventsCsv(bank: Bank, events: readonly TracedEvent[]): Promise<string> {
  const slot = (module: number, of: (module: number) => number): CsvField => (module < 0 ? null : of(module) + 1);
  return render(events, [
    { name: 'cycle', value: ({ cycle }) => cycle },
    { name: 'time_s', value: ({ timeS }) => timeS },
    { name: 'event', value: ({ kind }) => kind },
    { name: 'string', value: ({ module }) => slot(module, (m) => Math.floor(m / bank.positions)) },
    { name: 'position', value: ({ module }) => slot(module, (m) => m % bank.positions) },
    { name: 'cell', value: ({ module, cell }) => (cell < 0 ? null : cell - bank.cellStart[module] + 1) },
  ]);
}

/** `drawn.csv`: every value drawn for this bank, one row per cell with the values of its module beside it. */
export function renderDrawnCsv(
  bank: Bank,
  factors: { readonly loadFactor: number; readonly chargeFactor: number },
  { temperature }: TracedOptions,
): Promise<string> {
  const { ageing } = bank;
  const { offsetK, refusalK, releaseK } = bank.temperature;
  const refuses = temperature && refusalK.some(Number.isFinite);
  const cells = Array.from(bank.moduleOfCell, (m, c) => ({ m, c }));
  const ofCell = (name: string, values: Float64Array, factor = 1): Column<{ m: number; c: number }> => ({
    name,
    value: ({ c }) => factor * values[c],
  });
  const ofModule = (name: string, values: Float64Array, factor = 1): Column<{ m: number; c: number }> => ({
    name,
    value: ({ m }) => factor * values[m],
  });
  return render(cells, [
    { name: 'string', value: ({ m }) => Math.floor(m / bank.positions) + 1 },
    { name: 'position', value: ({ m }) => (m % bank.positions) + 1 },
    { name: 'module', value: ({ m }) => bank.placed[m].parameters.id },
    { name: 'cell', value: ({ m, c }) => c - bank.cellStart[m] + 1 },
    ofCell('capacity_Ah', bank.capacityAs, 1 / 3600),
    ofCell('cell_resistance_mOhm', bank.resistanceOhm, 1000),
    ofCell('leakage_mA', bank.leakageA, 1000),
    ofCell('coulombic_efficiency', bank.efficiency),
    ofCell('arrival_charge_percent', bank.arrivalCharge, 100),
    ofModule('path_resistance_mOhm', bank.pathOhm, 1000),
    ofModule('standby_mA', bank.standbyA, 1000),
    ofModule('over_voltage_V', bank.overVoltageV),
    ofModule('over_voltage_release_V', bank.overVoltageReleaseV),
    ofModule('under_voltage_V', bank.underVoltageV),
    ofModule('under_voltage_release_V', bank.underVoltageReleaseV),
    ofModule('over_current_charge_A', bank.overCurrentChargeA),
    ofModule('over_current_discharge_A', bank.overCurrentDischargeA),
    ofModule('bleed_start_V', bank.bleedStartV),
    ofModule('bleed_mA', bank.bleedA, 1000),
    { ...ofModule('warmer_than_ambient_K', offsetK), shown: temperature },
    { name: 'charge_refusal_below_degC', shown: refuses, value: ({ m }) => degC(refusalK[m]) },
    { name: 'charge_refusal_release_degC', shown: refuses, value: ({ m }) => degC(releaseK[m]) },
    { name: 'ageing_rate', shown: ageing !== null, value: ({ c }) => ageing?.[c]?.rate ?? null },
    { name: 'load_factor', value: () => factors.loadFactor },
    { name: 'charge_factor', value: () => factors.chargeFactor },
  ]);
}

/** Without the last digits, which the subtraction spoils; empty where there is no such temperature. */
function degC(kelvin: number): CsvField {
  return Number.isFinite(kelvin) ? Number((kelvin - CELSIUS_ZERO_K).toFixed(9)) : null;
}

function render<Row>(rows: readonly Row[], columns: readonly Column<Row>[]): Promise<string> {
  const shown = columns.filter((column) => column.shown !== false);
  return renderCsv(
    shown.map(({ name }) => name),
    rows.map((row) => shown.map(({ value }) => value(row))),
  );
}
