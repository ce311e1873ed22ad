import { z } from 'zod';
import { choleskyFactor } from '../mathematics/cholesky.js';
import { amount, choice } from './amount.js';
import type { Layers } from './layers.js';
import { QUANTITIES, type QuantityName } from './quantities.js';
import { QUANTITY_KEYS, quantityOfKey } from './quantity-keys.js';
import type { Reading } from './reading.js';
import { section } from './section.js';
import type { Correlation } from './study.js';
import { renderPath } from './study-path.js';

const KEYS = Object.values(QUANTITY_KEYS);
const quantity = z.enum(KEYS, `one of ${KEYS.join(', ')}`);

/** Correlations between two quantities at one level; replaces that of the grade as a whole. */
export const CORRELATIONS = z
  .array(
    section({
      level: choice(['lot', 'module', 'cell'], { description: 'Level at which the deviations go together.' }),
      of: z
        .tuple([quantity, quantity], 'a list of two quantities')
        .meta({ description: 'Two quantities by their keys in a stock.' }),
      rho: amount(
        { above: -1, below: 1 },
        { description: 'Correlation of their normal scores; below 0, one is low where the other is high.' },
      ),
    }),
    'a list such as [{level: module, of: [capacity_Ah, cell_resistance_mOhm], rho: -0.3}]',
  )
  .max(200, 'a list of at most 200 correlations');

export type CorrelationInput = z.infer<typeof CORRELATIONS>;

/** @returns the correlations of a stock; pairs that cannot be and matrices that are not positive definite are faults */
export function resolveCorrelations(
  layers: Layers<{ correlation?: CorrelationInput | undefined }>,
  reading: Reading,
): readonly Correlation[] {
  const picked = layers.pick('correlation');
  if (picked === undefined) return [];
  const correlations: Correlation[] = [];
  const seen = new Set<string>();
  for (const [index, { level, of, rho }] of picked.value.entries()) {
    const path = [...picked.path, index];
    const [first, second] = [quantityOfKey(of[0]), quantityOfKey(of[1])];
    if (first === undefined || second === undefined) continue;
    const pair = `${level} ${[first, second].sort().join(' ')}`;
    if (first === second) reading.fault([...path, 'of'], 'two different quantities');
    else if (seen.has(pair)) reading.fault([...path, 'of'], 'a pair that is given once for each level');
    else if (!spreadsAt(first, level) || !spreadsAt(second, level)) {
      reading.fault([...path, 'level'], 'a level at which both quantities can spread');
    } else correlations.push({ level, of: [first, second], rho });
    seen.add(pair);
    reading.origins.push({
      path: renderPath([...layers.owner, 'correlation', index]),
      value: `${rho} between ${of[0]} and ${of[1]} at level ${level}`,
      unit: '',
      source: picked.source,
    });
  }
  for (const level of ['lot', 'module', 'cell'] as const) {
    if (!isPositiveDefinite(matrixOf(correlations.filter((correlation) => correlation.level === level)))) {
      reading.fault(picked.path, `correlations that can hold together (positive definite) at level ${level}`);
    }
  }
  return correlations;
}

function spreadsAt(name: QuantityName, level: Correlation['level']): boolean {
  return QUANTITIES.some((known) => known.name === name && (known.levels as readonly string[]).includes(level));
}

/** Correlation matrix of the quantities that occur, in registry order. */
function matrixOf(correlations: readonly Correlation[]): number[][] {
  const names = QUANTITIES.map(({ name }) => name).filter((name) => correlations.some(({ of }) => of.includes(name)));
  return names.map((row) =>
    names.map((column) => {
      if (row === column) return 1;
      return correlations.find(({ of }) => of.includes(row) && of.includes(column))?.rho ?? 0;
    }),
  );
}

/** Positive definite: no quantity of the matrix is fixed by the others. */
function isPositiveDefinite(matrix: readonly (readonly number[])[]): boolean {
  const factor = choleskyFactor(matrix);
  return factor?.every((row) => (row.at(-1) ?? 0) > 0) ?? false;
}
