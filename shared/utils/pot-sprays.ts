/** One shot, or a gun that was flushed. Instants are epoch milliseconds. */
interface Shot {
  kind: 'first-spray' | 'last-spray' | 'gun-flushed'
  gunId: string | null
  gunName: string | null
  at: number
}

/** What one gun did with a pot. Instants are epoch milliseconds, null where nothing was noted. */
export interface GunSpray {
  gunId: string | null
  gunName: string | null
  firstAt: number | null
  lastAt: number | null
  flushedAt: number | null
}

const earliest = (a: number | null, b: number): number => (a === null || b < a ? b : a)
const latest = (a: number | null, b: number): number => (a === null || b > a ? b : a)

/** The guns that were loaded from one pot, in the order of time, each with its shots. */
export function gunSprays(shots: readonly Shot[]): GunSpray[] {
  const guns = new Map<string | null, GunSpray>()
  for (const { kind, gunId, gunName, at } of [...shots].sort((a, b) => a.at - b.at)) {
    const gun = guns.get(gunId) ?? { gunId, gunName, firstAt: null, lastAt: null, flushedAt: null }
    guns.set(gunId, gun)
    if (kind === 'first-spray') gun.firstAt = earliest(gun.firstAt, at)
    if (kind === 'last-spray') gun.lastAt = latest(gun.lastAt, at)
    if (kind === 'gun-flushed') gun.flushedAt = latest(gun.flushedAt, at)
  }
  return [...guns.values()]
}

/** First and last shot from one pot. */
export interface SpraySpan {
  /** Null where none was noted. */
  firstAt: number | null
  /** Null while a gun that was started was not ended. */
  lastAt: number | null
  /** Guns that were started and not ended. */
  unended: GunSpray[]
}

/** Of several guns the first shot of the first and the last of the last; there is no last one while one still sprays. */
export function sprayedSpan(guns: readonly GunSpray[]): SpraySpan {
  const unended = guns.filter(({ firstAt, lastAt }) => firstAt !== null && lastAt === null)
  const firsts = guns.flatMap(({ firstAt }) => firstAt ?? [])
  const lasts = guns.flatMap(({ lastAt }) => lastAt ?? [])
  return {
    firstAt: firsts.length > 0 ? Math.min(...firsts) : null,
    lastAt: unended.length === 0 && lasts.length > 0 ? Math.max(...lasts) : null,
    unended,
  }
}

/**
 * The latest that guns which were not ended can have sprayed a pot: `now`, or before it the moment at which each of them
 * was loaded from another pot. Instants are epoch milliseconds.
 */
export const latestShot = (open: readonly { movedOnAt: number | null }[], now: number): number =>
  open.length === 0 ? now : Math.max(...open.map(({ movedOnAt }) => Math.min(movedOnAt ?? now, now)))
