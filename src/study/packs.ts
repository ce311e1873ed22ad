import type { Reading } from './reading.js';
import type { Candidate } from './study.js';

/** What a candidate of native packs is beside candidates of modules. */
export type PackKind = 're-housed, not a product' | 'different purchase';

/**
 * - Re-housed: the cells of several modules in one pack. It shows what one BMS over the full series length would change;
 *   nobody sells it.
 * - Different purchase: packs bought as such, none of which stands in a candidate of modules. They have a lot of their
 *   own, so that the comparison is no longer one of wiring alone.
 *
 * @returns null for everything else: modules, packs that are modules of other candidates too, or packs alone
 */
export function packKind(candidate: Candidate, all: readonly Candidate[]): PackKind | null {
  if (candidate.wiring !== 'native') return null;
  if (isRehoused(candidate)) return 're-housed, not a product';
  const elsewhere = all.filter((other) => other.wiring !== 'native' || isRehoused(other));
  const modules = new Set(elsewhere.flatMap(({ strings }) => strings.flat()));
  const isOfModules = candidate.strings.flat().some((id) => modules.has(id));
  return elsewhere.length === 0 || isOfModules ? null : 'different purchase';
}

function isRehoused({ wiring, strings }: Candidate): boolean {
  return wiring === 'native' && strings.some((string) => string.length > 1);
}

/** @returns the candidates, the titles of packs saying what they are; such a title is an origin too */
export function titledPacks(candidates: readonly Candidate[], reading: Reading): readonly Candidate[] {
  return candidates.map((candidate) => {
    const kind = packKind(candidate, candidates);
    if (kind === null) return candidate;
    const title = candidate.title.includes(kind) ? candidate.title : `${candidate.title} (${kind})`;
    const source = reading.written(['candidates', candidate.key, 'title']) === undefined ? 'default' : 'study';
    reading.origins.push({ path: `candidates.${candidate.key}.title`, value: title, unit: '', source });
    return { ...candidate, title };
  });
}
