import type { LawInput } from './law.js';
import { hasPercent, isFixed, isInPercent, lawInSi } from './law-in-si.js';
import { lawSupport } from './law-support.js';
import { lawWords } from './law-words.js';
import type { Layers } from './layers.js';
import type { OriginSource } from './origin.js';
import type { Reading } from './reading.js';
import type { Level, SpreadInput, SpreadMapping } from './spread.js';
import type { Law } from './study.js';
import { renderPath, type StudyPath } from './study-path.js';
import { siFromKey, unitOfKey } from './units.js';

/** A quantity with its law at every level, before it takes the form that its owner needs. */
export interface ResolvedSpread {
  readonly nominal: number;
  readonly relative: boolean;
  readonly laws: Readonly<Record<Level, Law>>;
  /** Least and greatest value after the cuts of all levels are summed. */
  readonly lower: number;
  readonly upper: number;
}

interface Part<V> {
  readonly value: V;
  readonly source: OriginSource;
  readonly path: StudyPath;
}

const NONE: Law = { law: 'fixed' };

/** @returns a spread of nothing, for a quantity that a study does not ask for */
export function exactly(nominal: number): ResolvedSpread {
  return {
    nominal,
    relative: false,
    laws: { lot: NONE, module: NONE, cell: NONE, bank: NONE },
    lower: nominal,
    upper: nominal,
  };
}

const LEVELS: readonly Level[] = ['lot', 'module', 'cell', 'bank'];
const FIXED: LawInput = { law: 'fixed' };

/**
 * Puts a quantity together, nominal value and levels each from the first layer that has them: a number stands for
 * "exactly this", a mapping for the parts it names.
 *
 * @returns the spread in the units of the resolved study; undefined if no layer has a nominal value
 */
export function resolveSpread<T extends object, K extends keyof T & string>(
  layers: Layers<T>,
  key: K,
  reading: Reading,
): ResolvedSpread | undefined {
  const nominal = nominalOf(layers, key);
  if (nominal === undefined) return undefined;
  const parts = new Map<Level, Part<LawInput>>();
  for (const level of LEVELS) {
    const part = lawOf(layers, key, level);
    if (part !== undefined) parts.set(level, part);
  }
  const written = [...parts.values()].map(({ value }) => value).filter((law) => !isFixed(law));
  const relative = written.length > 0 && written.every(isInPercent);
  const nominalSi = siFromKey(key, nominal.value);
  const resolved = (level: Level): Law => {
    const part = parts.get(level);
    if (part === undefined) return NONE;
    if (unitOfKey(key) === 'degC' && hasPercent(part.value)) {
      reading.fault(part.path, 'a law whose amounts are in K: there is no percent of degC');
      return NONE;
    }
    return lawInSi(part.value, { key, nominalSi, relative, path: part.path, reading });
  };
  const laws = { lot: resolved('lot'), module: resolved('module'), cell: resolved('cell'), bank: resolved('bank') };
  const own = [...layers.owner, key];
  reading.origins.push({
    path: renderPath(own),
    value: String(nominal.value),
    unit: unitOfKey(key),
    source: nominal.source,
  });
  for (const [level, { value, source }] of parts) {
    if (isFixed(value)) continue;
    reading.origins.push({
      path: renderPath([...own, level]),
      value: lawWords(value, laws[level], { key, nominalSi, relative }),
      unit: '',
      source,
    });
  }
  const scale = relative ? nominalSi : 1;
  let lower = nominalSi;
  let upper = nominalSi;
  for (const level of LEVELS) {
    const support = lawSupport(laws[level], relative ? 1 : nominalSi);
    lower += scale * support.lower;
    upper += scale * support.upper;
  }
  return { nominal: nominalSi, relative, laws, lower, upper };
}

function nominalOf<T extends object>(layers: Layers<T>, key: keyof T & string): Part<number> | undefined {
  for (const { source, path, values } of layers.layers) {
    const written = values[key] as SpreadInput | undefined;
    if (typeof written === 'number') return { value: written, source, path: [...path, key] };
    if (written?.nominal !== undefined) return { value: written.nominal, source, path: [...path, key, 'nominal'] };
  }
  return undefined;
}

function lawOf<T extends object>(layers: Layers<T>, key: keyof T & string, level: Level): Part<LawInput> | undefined {
  for (const { source, path, values } of layers.layers) {
    const written = values[key] as SpreadInput | undefined;
    if (typeof written === 'number') return { value: FIXED, source, path: [...path, key] };
    if (written === undefined) continue;
    const law = lawWritten(written, level);
    if (law !== undefined) return { value: law.value, source, path: [...path, key, law.key] };
  }
  return undefined;
}

function lawWritten(written: SpreadMapping, level: Level): { value: LawInput; key: string } | undefined {
  const law = written[level];
  if (law !== undefined) return { value: law, key: level };
  const sd = written[`${level}_sd`];
  if (sd !== undefined) return { value: { law: 'normal', sd }, key: `${level}_sd` };
  const percent = written[`${level}_sd_percent`];
  if (percent !== undefined) return { value: { law: 'normal', sd_percent: percent }, key: `${level}_sd_percent` };
  return undefined;
}
