import seedrandom from 'seedrandom';

/** What a draw belongs to, apart from its quantity. Null where a level has no stock, module or cell. */
export interface DrawScope {
  readonly seed: string;
  readonly block: number;
  readonly index: number;
  readonly stock: string | null;
  readonly module: string | null;
  readonly level: 'bank' | 'lot' | 'module' | 'cell';
  /** From 1, counted from the negative end. */
  readonly cell: number | null;
  /** One lot of several by its name; left out for the one lot that every stock has. */
  readonly lot?: string | undefined;
}

/** Uniform number strictly between 0 and 1 that belongs to a quantity: the same however often it is asked for. */
export type UniformOf = (quantity: string) => number;

/** The next number of a stream. */
export type WholeNumbers = () => number;

/**
 * The uniforms of one scope. Each depends on the scope and the name of its quantity only, never on which others are
 * drawn, in what order, or where: every draw seeds a generator of its own with all of them and takes one number.
 *
 * The key is a JSON array followed by the quantity. JSON quotes and ends itself, so names and ids that would run together
 * in a plain concatenation still give different keys.
 *
 * The generator is Tyche-i: it takes 0.7 us from a key to a number and its neighbouring keys are unrelated, which is not
 * so for the xorshift generators of the package. `double` has 53 bits and never returns 0 or 1.
 *
 * @see Neves & Araujo 2011, Fast and small nonlinear pseudorandom number generators for computer simulation, PPAM
 */
export function uniformsOf(scope: DrawScope): UniformOf {
  const key = keyOf(scope, scope.index);
  return (quantity) => seedrandom.tychei(key + quantity).double();
}

/**
 * Whole numbers from 0 below 2^32 that belong to a column: to one draw of all instances of a block together. They depend
 * on the scope without its index, and on the quantity.
 */
export function columnStream(scope: DrawScope, quantity: string): WholeNumbers {
  const generator = seedrandom.tychei(keyOf(scope, null) + quantity);
  return () => generator.int32() >>> 0;
}

function keyOf({ seed, block, stock, module, level, cell, lot }: DrawScope, index: number | null): string {
  const names = [seed, block, index, stock, module, level, cell];
  return JSON.stringify(lot === undefined ? names : [...names, lot]);
}
