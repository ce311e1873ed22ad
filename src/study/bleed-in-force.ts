import type { BleedSettings, Study } from './study.js';

/** @returns the rules of bleeding and whose they are: they decide more about drift than any tolerance, so they are always said */
export function bleedInForce(study: Study): string {
  const owners = new Map<string, string[]>();
  const note = ({ rule, when }: Partial<BleedSettings>, owner: string): void => {
    const words = [rule, rule === 'none' ? undefined : when].filter((word) => word !== undefined).join(', ');
    if (words === '') return;
    const known = owners.get(words) ?? [];
    if (!known.includes(owner)) owners.set(words, [...known, owner]);
  };
  for (const stock of study.stocks) {
    const settings = stock.kind === 'population' ? [stock.bms] : stock.modules.map(({ bms }) => bms);
    for (const { bleed } of settings) note(bleed, `stock ${stock.key}`);
  }
  for (const { key, bleed } of study.candidates) if (bleed !== null) note(bleed, `candidate ${key}`);
  return `bleed rule in force: ${[...owners].map(([words, of]) => `${words} (${of.join(', ')})`).join('; ')}`;
}
