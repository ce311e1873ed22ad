import type { CycleMeasure, Measure, Statistic, Window } from './measure.js';

const SHARE: readonly Statistic[] = ['share_of_banks'];
const LOSS: readonly Statistic[] = ['mean', 'median', 'percentile_95'];
const NONE: readonly Statistic[] = [];
const YIELD: readonly Statistic[] = ['mean', 'median', 'percentile_5'];

function event<N extends string>(name: N, window: Window, title: string, definition: string) {
  return { name, unit: '%', kind: 'event', window, statistics: SHARE, title, definition } as const satisfies Measure;
}

function loss<N extends string>(name: N, unit: string, window: Window, title: string, definition: string) {
  return { name, unit, kind: 'amount', window, statistics: LOSS, title, definition } as const satisfies Measure;
}

function gain<N extends string>(name: N, unit: string, window: Window, title: string, definition: string) {
  return { name, unit, kind: 'amount', window, statistics: YIELD, title, definition } as const satisfies Measure;
}

/** A number that names a place: it has no mean and no percentile, only outcomes bank by bank. */
function place<N extends string>(name: N, title: string, definition: string) {
  return {
    name,
    unit: '',
    kind: 'amount',
    window: 'horizon',
    statistics: NONE,
    title,
    definition,
  } as const satisfies Measure;
}

const CHARGE_CUT =
  'A charge path opens by over-voltage or over-current before the dwell of the charger criterion began, while a module of the bank is more than';
const DISCHARGE_CUT = 'A discharge path opens by under-voltage or over-current while the cycle still has load to serve';
const MISSING = 'Missing charge m = Q (1 - z) of a cell; of a module the largest of its cells.';

/** All measures, in column order. Append only. */
export const MEASURES = [
  event('early_cutoff_on_charge', 'last-30', 'early cutoff on charge', `${CHARGE_CUT} 5 points below full.`),
  event(
    'early_cutoff_on_charge_margin_2',
    'last-30',
    'early cutoff on charge, 2 points',
    `${CHARGE_CUT} 2 points below full.`,
  ),
  event(
    'early_cutoff_on_charge_margin_10',
    'last-30',
    'early cutoff on charge, 10 points',
    `${CHARGE_CUT} 10 points below full.`,
  ),
  event('early_cutoff_on_charge_ever', 'horizon', 'early cutoff on charge, ever', `${CHARGE_CUT} 5 points below full.`),
  event(
    'early_cutoff_on_charge_by_spread',
    'last-30',
    'early cutoff on charge, by spread',
    'On a cycle on which the twin has none.',
  ),
  event(
    'early_cutoff_on_charge_by_duty',
    'last-30',
    'early cutoff on charge, by duty',
    'On a cycle on which the twin has one too.',
  ),
  event(
    'early_cutoff_on_charge_by_over_voltage',
    'last-30',
    'early cutoff on charge by over-voltage',
    'Cause: largest cell voltage.',
  ),
  event(
    'early_cutoff_on_charge_by_over_current',
    'last-30',
    'early cutoff on charge by over-current',
    'Cause: charge current.',
  ),
  loss(
    'early_cutoff_on_charge_cycles',
    '%',
    'last-30',
    'cycles with an early cutoff on charge',
    'Share of the cycles of the window.',
  ),
  loss(
    'early_cutoff_on_charge_first_cycle',
    'cycle',
    'horizon',
    'first cycle with an early cutoff on charge',
    'Absent if there is none.',
  ),
  place(
    'early_cutoff_on_charge_first_string',
    'string of the first early cutoff on charge',
    'From 1; absent if there is none.',
  ),
  place(
    'early_cutoff_on_charge_first_position',
    'position of the first early cutoff on charge',
    'From the negative end, from 1; absent if there is none.',
  ),
  place(
    'early_cutoff_on_charge_first_cell',
    'cell of the first early cutoff on charge',
    'Extreme cell from the negative end, from 1; absent if there is none.',
  ),
  loss(
    'charge_missed_on_charge',
    'Ah/day',
    'last-30',
    'charge missed by early cutoffs on charge',
    'Charge missing to full at the end of charge, mean over the positions of each string and summed over strings, on cycles with an early cutoff on charge; 0 on others; per day.',
  ),
  event('early_cutoff_on_discharge', 'last-30', 'early cutoff on discharge', `${DISCHARGE_CUT}.`),
  event('early_cutoff_on_discharge_ever', 'horizon', 'early cutoff on discharge, ever', `${DISCHARGE_CUT}.`),
  event(
    'early_cutoff_on_discharge_by_spread',
    'last-30',
    'early cutoff on discharge, by spread',
    'On a cycle on which the twin has none.',
  ),
  event(
    'early_cutoff_on_discharge_by_duty',
    'last-30',
    'early cutoff on discharge, by duty',
    'On a cycle on which the twin has one too.',
  ),
  event(
    'early_cutoff_on_discharge_by_under_voltage',
    'last-30',
    'early cutoff on discharge by under-voltage',
    'Cause: smallest cell voltage.',
  ),
  event(
    'early_cutoff_on_discharge_by_over_current',
    'last-30',
    'early cutoff on discharge by over-current',
    'Cause: discharge current.',
  ),
  loss(
    'early_cutoff_on_discharge_cycles',
    '%',
    'last-30',
    'cycles with an early cutoff on discharge',
    'Share of the cycles of the window.',
  ),
  loss(
    'early_cutoff_on_discharge_first_cycle',
    'cycle',
    'horizon',
    'first cycle with an early cutoff on discharge',
    'Absent if there is none.',
  ),
  place(
    'early_cutoff_on_discharge_first_string',
    'string of the first early cutoff on discharge',
    'From 1; absent if there is none.',
  ),
  place(
    'early_cutoff_on_discharge_first_position',
    'position of the first early cutoff on discharge',
    'From the negative end, from 1; absent if there is none.',
  ),
  place(
    'early_cutoff_on_discharge_first_cell',
    'cell of the first early cutoff on discharge',
    'Extreme cell from the negative end, from 1; absent if there is none.',
  ),
  loss(
    'charge_missed_on_discharge',
    'Ah/day',
    'last-30',
    'charge left behind by early cutoffs on discharge',
    'Mean charge of the modules of the string cut, at its first early cutoff on discharge of a cycle; 0 on cycles without; per day.',
  ),
  event('string_lost', 'horizon', 'string lost', 'A string cannot discharge while the bank serves the load.'),
  loss('string_lost_days', 'cycles', 'horizon', 'cycles with a string lost', 'Number of cycles.'),
  event('string_lost_by_spread', 'horizon', 'string lost, by spread', 'On a cycle on which the twin loses none.'),
  event(
    'load_lost',
    'horizon',
    'load lost',
    'Less than the demand is served for longer than 1 s, for whatever reason, the low-voltage disconnect included.',
  ),
  loss('load_lost_days', 'cycles', 'horizon', 'cycles with load lost', 'Number of cycles.'),
  event('load_lost_by_spread', 'horizon', 'load lost, by spread', 'On a cycle on which the twin loses none.'),
  event('load_lost_by_duty', 'horizon', 'load lost, by duty', 'On a cycle on which the twin loses load too.'),
  loss(
    'energy_not_supplied',
    'kWh',
    'horizon',
    'energy not supplied',
    'Demand less what was served, over the horizon.',
  ),
  loss(
    'energy_not_supplied_by_spread',
    'kWh',
    'horizon',
    'energy not supplied, by spread',
    'On cycles on which the twin loses none.',
  ),
  loss(
    'drift',
    '%',
    'last-7',
    'drift',
    `${MISSING} Largest less smallest m of the modules of a string, worst string, of rated capacity; mean over the window. Absent with one BMS over the full series length.`,
  ),
  loss('drift_charge', 'Ah', 'last-7', 'drift', 'As drift, in Ah.'),
  loss(
    'drift_growth',
    '%/month',
    'horizon',
    'drift growth',
    'Difference of 30-day means of drift, last less first after day 30, per 30 days; of 7-day means where the run is shorter than 90 days.',
  ),
  loss(
    'cell_drift',
    '%',
    'last-7',
    'cell drift',
    `${MISSING} Largest less smallest m of the cells along a series path, worst path, of rated capacity; mean over the window.`,
  ),
  loss('cell_drift_charge', 'Ah', 'last-7', 'cell drift', 'As cell drift, in Ah.'),
  loss('cell_drift_growth', '%/month', 'horizon', 'cell drift growth', 'As drift growth, for cell drift.'),
  event('drift_past_limit', 'horizon', 'drift past its limit', 'Drift passes the limit of the study on some cycle.'),
  loss(
    'drift_past_limit_first_cycle',
    'cycle',
    'horizon',
    'first cycle with drift past its limit',
    'Absent if there is none.',
  ),
  loss(
    'charge_spread_at_end_of_charge',
    '%',
    'last-7',
    'spread of charge at end of charge',
    'Largest less smallest charge fraction of the modules of a string at the end of charge, worst string; mean over the window.',
  ),
  loss(
    'charge_ended_by_bms',
    '%',
    'horizon',
    'charges ended by a BMS',
    'Share of cycles whose charge ended with every charge path open.',
  ),
  gain(
    'usable_capacity_start',
    'Ah',
    'first',
    'usable capacity at the start',
    'Capacity test on a copy of the bank at 25 degC: charged by its own charger, 1 h rest, C/5 of rated bank capacity until that cannot be carried.',
  ),
  gain('usable_capacity', 'Ah', 'last', 'usable capacity', 'As at the start, after the last cycle.'),
  gain('usable_energy_start', 'kWh', 'first', 'usable energy at the start', 'Energy delivered in the capacity test.'),
  gain('usable_energy', 'kWh', 'last', 'usable energy', 'Energy delivered in the capacity test.'),
  gain(
    'usable_to_first_string_start',
    'Ah',
    'first',
    'usable capacity to the first string lost, at the start',
    'Charge delivered in the capacity test until a string opens.',
  ),
  gain(
    'usable_to_first_string',
    'Ah',
    'last',
    'usable capacity to the first string lost',
    'Charge delivered in the capacity test until a string opens.',
  ),
  loss(
    'lost_capacity_start',
    '%',
    'first',
    'lost capacity at the start',
    '1 - usable / ideal; ideal = sum of all cell capacities / cells in series.',
  ),
  loss(
    'lost_capacity',
    '%',
    'last',
    'lost capacity',
    '1 - usable / ideal; ideal = sum of all cell capacities / cells in series.',
  ),
  loss('lost_capacity_of_rated', '%', 'last', 'lost capacity, against rated', '1 - usable / rated bank capacity.'),
  loss(
    'lost_capacity_of_twin',
    '%',
    'last',
    'lost capacity, against the twin',
    "1 - usable / the twin's usable capacity.",
  ),
  loss('over_voltage_trips', 'per cycle', 'horizon', 'over-voltage trips', 'All modules, per cycle.'),
  loss('under_voltage_trips', 'per cycle', 'horizon', 'under-voltage trips', 'All modules, per cycle.'),
  loss('over_current_trips', 'per cycle', 'horizon', 'over-current trips', 'All modules, per cycle.'),
  event(
    'averaged_chatter',
    'horizon',
    'trips counted by rate',
    'A BMS switched so often that trips were counted as rate x time.',
  ),
  loss(
    'sharing_peak',
    '',
    'horizon',
    'peak string current over an equal share',
    'Largest current of a module / (largest bank current / strings); the current of a string is that of its modules. Absent with one string.',
  ),
  loss(
    'sharing_rms',
    '',
    'horizon',
    'r.m.s. string current over an equal share',
    'Largest root mean square current of a module / (that of the bank / strings). Absent with one string.',
  ),
  loss(
    'peak_module_current',
    'A',
    'horizon',
    'peak module current',
    'Largest current of a module, after every switching too.',
  ),
  loss(
    'peak_module_current_of_rating',
    '%',
    'horizon',
    'peak module current, of its rating',
    'Largest ratio of the peak current of a module to its peak rating. Absent if none is stated.',
  ),
  loss(
    'above_continuous_rating',
    'h',
    'horizon',
    'time above the continuous rating',
    'Time in which the current of any module is above its continuous rating. Absent if none is stated.',
  ),
  loss(
    'peak_string_current_of_lead_rating',
    '%',
    'horizon',
    'peak string current, of the lead rating',
    'Peak module current / ampacity of the leads. Absent if none is stated.',
  ),
  loss(
    'peak_string_current_of_fuse_rating',
    '%',
    'horizon',
    'peak string current, of the fuse rating',
    'Peak module current / rated current of the string fuse. Absent if none is stated.',
  ),
  loss('link_current_peak', 'A', 'horizon', 'peak link current', 'Largest current of a link. Absent without links.'),
  loss(
    'link_current_rms',
    'A',
    'horizon',
    'r.m.s. link current',
    'Root mean square current of the most loaded link. Absent without links.',
  ),
  loss(
    'link_current_peak_of_rating',
    '%',
    'horizon',
    'peak link current, of its rating',
    'Peak link current / ampacity of a link. Absent if none is stated.',
  ),
  loss(
    'joining_voltage',
    'mV',
    'first',
    'voltage difference at joining',
    'Largest difference of open-circuit voltage between strings when the bank is put together, before any current; where strings are tied between their modules, also between modules of equal position. Absent with one string.',
  ),
  event(
    'joining_voltage_past_limit',
    'first',
    'joined more than 50 mV apart',
    'Voltage difference at joining above 50 mV. Absent with one string.',
  ),
  loss(
    'joining_current',
    'A',
    'first',
    'current at joining',
    'Largest current of a module at the instant at which the strings are joined, every path closed, nothing at the bus. Absent with one string.',
  ),
  loss(
    'circulating_charge',
    'Ah/day',
    'horizon',
    'circulating charge',
    'Charge moved between strings while the bank current is at most rated capacity / 100 h: half of what the magnitudes of the charges of the strings exceed that of the bank by, step by step, mean over positions; per day. Absent with one string.',
  ),
  loss(
    'throughput_spread',
    '',
    'horizon',
    'spread of throughput',
    'Largest / smallest throughput of a string: charge in either direction, mean over its modules. Absent with one string.',
  ),
  loss(
    'blocking_voltage',
    'V',
    'horizon',
    'voltage across an open path',
    'Largest voltage across the open paths of modules in series, which one BMS may have to block alone. Absent if none was open.',
  ),
  loss(
    'blocking_voltage_of_rating',
    '%',
    'horizon',
    'voltage across an open path, of its rating',
    'Voltage across an open path / voltage that a BMS can block. Absent if none is stated or none was open.',
  ),
  loss(
    'upkeep_visits',
    '',
    'horizon',
    'upkeep visits',
    'Visits at which every module is charged alone to full; none after the last cycle.',
  ),
  loss(
    'upkeep_visits_per_year',
    'per year',
    'horizon',
    'upkeep visits per year',
    'Visits per 365 days of the horizon.',
  ),
  loss(
    'longest_without_full_charge',
    'days',
    'horizon',
    'longest time without a full charge',
    'Longest time between instants at which the charger criterion was met; start, end and visits count as such.',
  ),
  loss(
    'trips_to_full_charge',
    '',
    'horizon',
    'trips in the full charge after the longest time',
    'BMS trips of all modules from the emptiest moment of the longest time without a full charge to the charger criterion that ended it; absent if a visit or the end of the run did.',
  ),
  loss(
    'charge_to_full_charge',
    'Ah',
    'horizon',
    'charge to full after the longest time',
    'Charge into the bank at its bus over the same time; absent likewise.',
  ),
  event('cell_damaged', 'horizon', 'cell damaged', 'A cell was below 2.0 V.'),
  loss('damaged_cells', '', 'horizon', 'damaged cells', 'Cells that were below 2.0 V at any time.'),
  loss(
    'charger_only',
    'min/day',
    'horizon',
    'load on the charger alone',
    'Time for which the load was fed while no module conducted, per day.',
  ),
  loss(
    'energy_in',
    'kWh',
    'horizon',
    'energy in',
    'Energy into the bank at its bus over the horizon; visits left out.',
  ),
  gain('energy_out', 'kWh', 'horizon', 'energy out', 'Energy out of the bank at its bus over the horizon.'),
  gain(
    'energy_stored',
    'kWh',
    'horizon',
    'gain of stored energy',
    'Energy of the cells at open circuit at the end less that at the start; what visits added left out.',
  ),
  loss('wiring_loss', 'kWh', 'horizon', 'loss in wiring', 'Heat in leads and links over the horizon.'),
  loss('bleed_loss', 'kWh', 'horizon', 'loss in bleed', 'Energy that bleeding took from the cells over the horizon.'),
  loss(
    'equaliser_charge',
    'Ah',
    'horizon',
    'charge moved by equalisers',
    'Charge that equalisers took from modules, all devices, over the horizon.',
  ),
  loss(
    'equaliser_counter_charge',
    'Ah',
    'horizon',
    'counter-productive charge of equalisers',
    'The part of it taken from the module of the two with more missing charge.',
  ),
  loss(
    'equaliser_loss',
    'kWh',
    'horizon',
    'loss in equalisers',
    'Energy taken less energy delivered by equalisers, standby included, over the horizon.',
  ),
  gain(
    'round_trip',
    '%',
    'horizon',
    'round trip',
    'Energy out / (energy in - gain of stored energy); absent where nothing came out.',
  ),
  loss(
    'capacity_fade',
    '%',
    'horizon',
    'capacity fade',
    'Share of its capacity at the start that a cell has lost by the end, mean of all cells; absent where none ages.',
  ),
  loss('capacity_fade_worst_cell', '%', 'horizon', 'capacity fade, worst cell', 'The same of the cell that lost most.'),
  loss(
    'capacity_fade_spread',
    '%',
    'horizon',
    'spread of capacity fade',
    'Largest less smallest fade of the modules of the bank, each the mean of its cells.',
  ),
] as const;

export type MeasureName = (typeof MEASURES)[number]['name'];

/** Recorded at the checkpoint cycles, at the end of the cycle. Append only. */
export const CYCLE_MEASURES = [
  {
    name: 'drift',
    unit: '%',
    title: 'drift',
    definition: 'Largest less smallest missing charge of the modules of a string, worst string, of rated capacity.',
  },
  { name: 'cell_drift', unit: '%', title: 'cell drift', definition: 'The same over the cells along a series path.' },
  { name: 'trips', unit: '', title: 'trips so far', definition: 'BMS trips of all modules since cycle 1.' },
  { name: 'energy_not_supplied', unit: 'kWh', title: 'energy not supplied so far', definition: 'Since cycle 1.' },
  {
    name: 'early_cutoffs_on_charge',
    unit: 'cycles',
    title: 'cycles with an early cutoff on charge so far',
    definition: 'Since cycle 1.',
  },
  {
    name: 'early_cutoffs_on_discharge',
    unit: 'cycles',
    title: 'cycles with an early cutoff on discharge so far',
    definition: 'Since cycle 1.',
  },
] as const satisfies readonly CycleMeasure[];

export type CycleMeasureName = (typeof CYCLE_MEASURES)[number]['name'];

const BY_NAME: ReadonlyMap<string, Measure> = new Map(MEASURES.map((measure) => [measure.name, measure]));

/** @returns the measure of that name, or undefined if there is none */
export function measureNamed(name: string): Measure | undefined {
  return BY_NAME.get(name);
}
