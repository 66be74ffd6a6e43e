import type { Canonical } from './canonical'

/**
 * What a change did, for the audit: figures before and after, of words only that they changed.
 *
 * @param before what stood; a new thing has nothing
 * @param after what was sent; members left out were not changed
 * @param words members whose text is nobody's business in the audit
 */
export function changesOf(before: object, after: object, words: readonly string[]): { changed: Canonical, reworded: string[] } {
  const old = before as Record<string, unknown>
  const names = Object.entries(after).filter(([name, value]) => value !== undefined && JSON.stringify(old[name]) !== JSON.stringify(value)).map(([name]) => name)
  const changed = names.filter(name => !words.includes(name))
    .map(name => [name, { from: (old[name] ?? null) as Canonical, to: (after as Record<string, Canonical>)[name] ?? null }] as const)
  return { changed: Object.fromEntries(changed), reworded: names.filter(name => words.includes(name)).sort() }
}
