/**
 * Number of the engine: raised whenever the same study would give other outcomes than before.
 * Part of the simulation key, so that outcomes of different engines are never mixed.
 */
export const ENGINE = 6;
