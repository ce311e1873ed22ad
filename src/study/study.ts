import type { AgeingSettings, ModuleAgeing } from './ageing-settings.js';
import type { QuantityName } from './quantities.js';
import type { SamplingPlan } from './sampling-plan.js';
import type { BankRatings, CustomNetwork, ModuleRatings, TakeOff } from './wiring-options.js';

export type { BankRatings, CustomBranch, CustomNetwork, ModuleRatings, TakeOff } from './wiring-options.js';

/**
 * The resolved study: what a study file means once every default, grade and copy is filled in and every unit converted.
 *
 * Plain data (it is written as JSON and cloned to threads). Inside values are SI with charge in Ah and shares as
 * fractions; currents into a positive terminal are positive. Nothing beyond this type knows about YAML or percent.
 */
export interface Study {
  /** Version of the study format, the value of the key `motleybank`. */
  readonly format: 1;
  readonly title: string;
  /** Canonical text of the seed: the study's number or text. */
  readonly seed: string;
  /** Sampled banks of every candidate. */
  readonly instances: number;
  /** Instances in a block, a power of 2. */
  readonly blockSize: number;
  readonly plan: SamplingPlan;
  /** Draws with a column of the sequence of Sobol, in order of columns; absent under other plans. */
  readonly sobolColumns?: readonly SobolColumn[];
  /** Horizon: cycles simulated for every instance. */
  readonly cycles: number;
  /** Two-sided confidence of every interval, e.g. 0.95. */
  readonly confidenceFraction: number;
  /** Drift (fraction of rated capacity) whose first passing is reported. */
  readonly driftLimitFraction: number;
  readonly ocvTables: readonly OcvTable[];
  readonly stocks: readonly Stock[];
  readonly duty: Duty;
  readonly candidates: readonly Candidate[];
  /** Key of the candidate that the others are compared with. */
  readonly reference: string;
  readonly acceptance: readonly AcceptanceLine[];
  /** Absent: the number of instances is fixed. */
  readonly enough?: Enough;
}

/** The run ends at the first look at which every watched estimate of every candidate is narrow enough. */
export interface Enough {
  /** Numbers of instances, ascending, whole blocks; the last is that of the study. */
  readonly looks: readonly number[];
  readonly watched: readonly WatchedEstimate[];
}

export interface WatchedEstimate {
  readonly measure: string;
  readonly statistic: string;
  /** In the unit of the measure as printed; percentages in points. */
  readonly halfWidth: number;
}

/** Address of a draw that is spread together with others. */
export interface SobolColumn {
  readonly level: 'bank' | 'lot' | 'module';
  /** Null for a factor of the bank. */
  readonly stock: string | null;
  readonly module: string | null;
  /** One lot of several by its name; left out for the one lot that every stock has. */
  readonly lot?: string;
  readonly quantity: string;
}

/** Open-circuit voltage of a cell against its charge fraction, with its continuation beyond both ends. */
export interface OcvTable {
  readonly interpolation: 'monotone' | 'linear';
  /** Strictly ascending charge fractions. */
  readonly chargeFraction: readonly number[];
  /** Volts at those charge fractions, strictly ascending. */
  readonly voltageV: readonly number[];
  /** Slope below the first point in V per unit of charge fraction; null continues with the slope of the end. */
  readonly slopeBelowV: number | null;
  readonly slopeAboveV: number | null;
}

/** The law of one deviation, mean 0. Amounts are fractions of the nominal if the spread is relative, else SI. */
export type Law =
  | { readonly law: 'fixed' }
  | { readonly law: 'normal'; readonly sd: number }
  | { readonly law: 'truncated-normal'; readonly sd: number; readonly lower: number; readonly upper: number }
  /** nominal x (F - 1) with F lognormal of mean 1; `sd` in the same unit as for the other laws. */
  | { readonly law: 'lognormal'; readonly sd: number }
  | { readonly law: 'uniform'; readonly halfWidth: number }
  /** `halfWidth` is half of the whole range; the peak lies at a fraction of the way from its lower to its upper end. */
  | { readonly law: 'triangular'; readonly halfWidth: number; readonly peakFraction: number }
  /** `sd` is that of the law without its cut. */
  | { readonly law: 'weibull'; readonly shape: number; readonly sd: number }
  | { readonly law: 'beta'; readonly alpha: number; readonly beta: number; readonly halfWidth: number }
  /** Every value is one of these, in ascending order, their mean taken off. */
  | { readonly law: 'resampled'; readonly values: readonly number[] }
  | MixtureLaw;

/** `factor` times the mixture of the parts, moved so that its mean is 0. */
export interface MixtureLaw {
  readonly law: 'mixture';
  readonly factor: number;
  readonly parts: readonly MixturePart[];
}

/** A part of a mixture: the values of its law, moved by `at`. */
export interface MixturePart {
  /** Weights of a mixture sum to 1. */
  readonly weight: number;
  readonly at: number;
  readonly law: Exclude<Law, MixtureLaw>;
}

/** value = nominal x (1 + lot + module + cell) if `relative`, else nominal + lot + module + cell. */
export interface Spread {
  readonly nominal: number;
  readonly relative: boolean;
  readonly lot: Law;
  readonly module: Law;
  readonly cell: Law;
}

export interface Correlation {
  readonly level: 'lot' | 'module' | 'cell';
  readonly of: readonly [QuantityName, QuantityName];
  readonly rho: number;
}

export type Stock = PopulationStock | ExplicitStock;

/** A population of modules of one make and age, from which the modules named are drawn. */
export interface PopulationStock {
  readonly kind: 'population';
  readonly key: string;
  readonly moduleIds: readonly string[];
  readonly cellsInSeries: number;
  readonly ratedAh: number;
  readonly quantities: Readonly<Record<QuantityName, Spread>>;
  readonly correlations: readonly Correlation[];
  readonly cell: CellModel;
  readonly bms: BmsSettings;
  /** By module: whose draws its cells take, one per cell from the negative end. Left out where all cells draw their own. */
  readonly cellsDrawnAs?: Readonly<Record<string, readonly DrawnCell[]>>;
  /** Absent: all modules are of one lot. */
  readonly lots?: Lots;
  /** Absent: nothing was measured. */
  readonly measured?: MeasuredModules;
  /** Absent if none is stated. */
  readonly ratings?: ModuleRatings;
  /** Absent: capacity and resistance stay as they are. */
  readonly ageing?: AgeingSettings;
}

/** Address of the draws of a cell. */
export interface DrawnCell {
  readonly stock: string;
  readonly module: string;
  /** From 1, counted from the negative end. */
  readonly cell: number;
}

/** Lots of a stock: so many, each module coming from one of them by chance, or the lot of each module by its name. */
export type Lots =
  | { readonly kind: 'by-chance'; readonly count: number }
  | { readonly kind: 'by-name'; readonly lotOf: Readonly<Record<string, string>> };

/**
 * Measured values of modules. They stand for nominal value, lot and module deviation of their quantities; cells keep
 * their deviations, moved so that the smallest cell has the measured capacity, and their mean any other measured value.
 */
export type MeasuredModules = {
  readonly quantities: readonly QuantityName[];
  /** Standard deviation of the measurement, quantity by quantity; 0 = exact. */
  readonly uncertaintySd: readonly number[];
} & (
  | { readonly rows: 'of-each-module'; readonly valuesOf: Readonly<Record<string, readonly number[]>> }
  | { readonly rows: 'resampled'; readonly values: readonly (readonly number[])[] }
);

/** Modules written down one by one: nothing is drawn. */
export interface ExplicitStock {
  readonly kind: 'explicit';
  readonly key: string;
  readonly modules: readonly ModuleParameters[];
}

/** What all cells of a stock have in common. */
export interface CellModel {
  /** Index into `ocvTables` of the study. */
  readonly ocv: number;
  /** Polarisation pairs of a cell of nominal resistance; they scale with the cell's resistance. */
  readonly polarisation: readonly { readonly resistanceOhm: number; readonly timeConstantS: number }[];
  /** Half of the gap between the charge and discharge branches, V. */
  readonly hysteresisV: number;
  /** Plett's gamma, dimensionless. */
  readonly hysteresisRate: number;
  /** Absent: resistance and leakage are the same at every temperature. */
  readonly activation?: Activation;
}

/** Activation energies by which resistance and leakage of a cell follow its temperature (Arrhenius), J/mol. */
export interface Activation {
  readonly resistanceJPerMol: number;
  readonly leakageJPerMol: number;
}

/** Settings of a BMS, all but one without spread. */
export interface BmsSettings {
  readonly overVoltageDelayS: number;
  readonly overVoltageReleaseHoldS: number;
  readonly underVoltageDelayS: number;
  readonly underVoltageReleaseHoldS: number;
  /** The under-voltage latch clears only while charge current flows. */
  readonly underVoltageReleaseOnCharge: boolean;
  readonly overCurrent: OverCurrentSettings;
  /** Voltage dropped by a path that conducts only the other way. */
  readonly forwardDropV: number;
  /** Discharge current above which the drop of an over-voltage latch goes away; null = never. */
  readonly recloseA: number | null;
  readonly recloseDelayS: number;
  readonly bleed: BleedSettings;
  /** Standby current after `asleepAfterS` with the discharge path open. */
  readonly asleepA: number;
  readonly asleepAfterS: number;
  /**
   * The charge path opens below one temperature and closes from a higher one on; absent: never. Of a population its
   * nominal values, of a module its own.
   */
  readonly chargeRefusal?: { readonly belowK: number; readonly releaseK: number };
}

export interface OverCurrentSettings {
  readonly delayS: number;
  /** `path` opens the path of the current's direction, `both` blocks both. */
  readonly opens: 'path' | 'both';
  readonly retryS: number;
  /** Trips within `lockWindowS` after which the BMS stays open; null = never. */
  readonly lockAfterTrips: number | null;
  readonly lockWindowS: number;
  /** What releases the lock: current the other way, or a visit. */
  readonly lock: 'opposite-current' | 'manual';
}

export interface BleedSettings {
  readonly rule: 'each' | 'above-lowest' | 'none';
  readonly when: 'charging' | 'always';
  readonly stopBelowStartV: number;
  readonly deltaV: number;
}

/**
 * One module as it stands in a bank: sampled from a population or written down.
 * Cells are listed from the negative end; arrays over cells have the length of `capacityAh`.
 */
export interface ModuleParameters {
  readonly id: string;
  readonly stock: string;
  readonly ratedAh: number;
  readonly ocv: number;
  readonly hysteresisV: number;
  readonly hysteresisRate: number;
  readonly capacityAh: readonly number[];
  readonly resistanceOhm: readonly number[];
  /** Polarisation pairs; `resistanceOhm` over cells. */
  readonly polarisation: readonly { readonly timeConstantS: number; readonly resistanceOhm: readonly number[] }[];
  /** Internal self-discharge current of each cell. */
  readonly leakageA: readonly number[];
  /** Coulombic efficiency of each cell. */
  readonly efficiency: readonly number[];
  /** Charge fraction as received. */
  readonly arrivalCharge: readonly number[];
  /** BMS path and joints in series with the cells. */
  readonly pathResistanceOhm: number;
  readonly standbyA: number;
  readonly overVoltageV: number;
  readonly overVoltageReleaseV: number;
  readonly underVoltageV: number;
  readonly underVoltageReleaseV: number;
  readonly overCurrentChargeA: number;
  readonly overCurrentDischargeA: number;
  readonly bleedA: number;
  readonly bleedStartV: number;
  readonly bms: BmsSettings;
  readonly activation?: Activation;
  /** By how much the module is warmer than its slot, K; absent = 0. */
  readonly temperatureOffsetK?: number;
  /** Of modules written down; absent if none is stated. */
  readonly ratings?: ModuleRatings;
  /** Absent: capacity and resistance stay as they are. */
  readonly ageing?: ModuleAgeing;
}

/** A duty: parts in sequence, each repeated, the whole again and again up to the horizon. */
export interface Duty {
  /** `profile`: cycles of `cycleS` by the clock; `phases`: a cycle is one pass of phases, however long it takes. */
  readonly kind: 'profile' | 'phases';
  /** Length of a cycle of a profile, s; for phases, the sum of the longest durations of the longest pass. */
  readonly cycleS: number;
  readonly parts: readonly DutyPart[];
  /** Factor on every load of a bank (level `bank`); mean 1 unless the study says otherwise. */
  readonly loadFactor: BankSpread;
  readonly chargeFactor: BankSpread;
}

export interface BankSpread {
  readonly nominal: number;
  readonly relative: boolean;
  readonly bank: Law;
}

export interface DutyPart {
  readonly name: string;
  readonly repeat: number;
  /** The part's cycles in order, each a list of segments; rows that straddle the end of a cycle are split. */
  readonly cycles: readonly (readonly DutySegment[])[];
}

/** A stretch of constant demand. */
export interface DutySegment {
  /** Longest duration, s. */
  readonly durationS: number;
  /** Power drawn by the load, W, 0 or more. */
  readonly loadW: number;
  /** Current drawn by the load, A, 0 or more, beside `loadW`. */
  readonly loadA: number;
  /** Power that the charger can give, W; 0 = no charging; null = bounded by the charger's own limit only. */
  readonly chargeW: number | null;
  /** The segment ends early when the charger's criterion is met. */
  readonly endsWhenCharged: boolean;
  /** Temperature around the bank, K; absent = 298.15 (25 degC). */
  readonly ambientK?: number;
}

export interface Candidate {
  readonly key: string;
  readonly title: string;
  readonly wiring: 'strings' | 'cross-linked' | 'native' | 'custom';
  /** Module ids of each string from its negative end; all strings equally long. */
  readonly strings: readonly (readonly string[])[];
  /** Leads of each string. */
  readonly leads: readonly StringLeads[];
  /** Between neighbouring strings at equal positions (cross-linked only). */
  readonly linkOhm: number;
  readonly charger: ChargerSettings;
  readonly load: LoadSettings;
  readonly commissioning: 'as-received' | 'each-module-full';
  /** Bleed that replaces that of every module of this candidate, key by key; null = as the modules have it. */
  readonly bleed: BleedOverride | null;
  /** By how much each slot is warmer than ambient, string by string, K; absent = 0 everywhere. */
  readonly slotOffsetK?: readonly (readonly number[])[];
  /** Absent: a star of equal leads. */
  readonly takeOff?: TakeOff;
  /** The wiring `custom` only, which has no leads and links beside it. */
  readonly network?: CustomNetwork;
  /** Absent if none is stated. */
  readonly ratings?: BankRatings;
  /** Devices between neighbouring modules of every string; absent = none. */
  readonly equaliser?: EqualiserSettings;
  /** Rebalancing visits; absent = none. */
  readonly upkeep?: Upkeep;
}

/** One device between two neighbouring modules of a string. */
export interface EqualiserSettings {
  /** Greatest current taken from the module of higher voltage. */
  readonly currentA: number;
  /** Difference of module voltages from which it works, and at which it reaches its greatest current. */
  readonly startV: number;
  readonly fullV: number;
  /** Charge delivered of charge taken. */
  readonly efficiency: number;
  /** Drawn from both modules. */
  readonly standbyA: number;
  /** Bank voltage above which it works; null = always. */
  readonly enableV: number | null;
}

/**
 * When a visit comes: after so many cycles, after so long, or once drift between modules, a fraction of rated capacity,
 * is above a limit. Looked at when a cycle has ended.
 */
export type Upkeep =
  | { readonly everyCycles: number }
  | { readonly everyS: number }
  | { readonly driftFraction: number };

export interface BleedOverride {
  readonly rule?: 'each' | 'above-lowest' | 'none';
  readonly when?: 'charging' | 'always';
  readonly stopBelowStartV?: number;
  readonly deltaV?: number;
  readonly currentA?: number;
  readonly startV?: number;
}

/** Resistances of one string: bus to first negative post, between neighbouring modules, last positive post to bus. */
export interface StringLeads {
  readonly negativeOhm: number;
  /** Above the tap of a cross-link: from it to the negative post of the next module. */
  readonly betweenOhm: number;
  readonly positiveOhm: number;
}

export interface ChargerSettings {
  readonly limitA: number;
  readonly absorptionV: number;
  /** Bank current below which charging ends; 0 = never by tail. */
  readonly tailA: number;
  readonly tailHoldS: number;
  /** Longest time at absorption; null = no limit. */
  readonly absorptionS: number | null;
  /** Voltage held afterwards; null = off afterwards. */
  readonly floatV: number | null;
  /** Charging begins again at every cycle; below `restartV` it does so in any case. */
  readonly restart: 'each-cycle' | 'below-voltage';
  readonly restartV: number;
}

export interface LoadSettings {
  /** Low-voltage disconnect, V at the bus; null = none. */
  readonly disconnectV: number | null;
  readonly disconnectDelayS: number;
  readonly reconnectV: number;
}

export interface AcceptanceLine {
  readonly measure: string;
  readonly statistic: string;
  readonly bound: 'at-most' | 'at-least';
  /** In the unit of the statistic as printed (percent where it prints percent). */
  readonly limit: number;
}
