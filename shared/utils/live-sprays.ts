import type { LivePot, PotGun } from '../schemas/live'

type Sprayed = Pick<LivePot, 'id' | 'jobId' | 'stage' | 'guns'>

/** Guns of a pot that were started and of which nobody noted the last spray. */
export const unendedGuns = ({ guns }: Pick<LivePot, 'guns'>): PotGun[] => guns.filter((gun) => gun.firstSprayAt !== null && gun.lastSprayAt === null)

/**
 * The pot whose last spray has to be asked for before this one is sprayed: another of the same job, or another that the
 * same gun is still said to spray. One gun holds one pot.
 */
export function toBeEnded<Pot extends Sprayed>(pot: Sprayed, gunId: string | null, pots: readonly Pot[]): Pot | undefined {
  return pots.find((other) => other.id !== pot.id && other.stage === 'sealed' && unendedGuns(other)
    .some((gun) => (pot.jobId !== null && other.jobId === pot.jobId) || (gunId !== null && gun.gunId === gunId)))
}

/** Guns that this pot is or was in and that were not flushed after it; the planned gun where none was noted. */
export function toBeFlushed(pot: Pick<LivePot, 'guns' | 'gunId' | 'gunName'>): Pick<PotGun, 'gunId' | 'gunName'>[] {
  const sprayed = pot.guns.filter((gun) => gun.firstSprayAt !== null || gun.lastSprayAt !== null)
  if (sprayed.length > 0) return sprayed.filter(({ flushedAt }) => flushedAt === null)
  return pot.guns.some(({ flushedAt }) => flushedAt !== null) ? [] : [{ gunId: pot.gunId, gunName: pot.gunName }]
}
