import type { Knex } from 'knex'
import { clearanceOf, type ExtractionChange } from '#shared/engine/clearance'
import type { LiveClearance } from '#shared/schemas/live'
import { minutesToMs, toIso } from '#shared/utils/instant'
import { findClearanceFacts, type ClearanceFacts, type Extraction } from '../repositories/clearance'

const engineWord: Record<Extraction, ExtractionChange['extraction']> = { running: 'running', off: 'stopped', unknown: 'unknown' }

/** How the booth's clearance stands at `now`, epoch milliseconds; null where nobody needs a mask for isocyanates. */
export function judgeClearance(facts: ClearanceFacts, now: number): LiveClearance | null {
  const { lastShotAt, sprayingSince } = facts
  const lastShot = lastShotAt === null ? null : toIso(lastShotAt)
  if (sprayingSince !== null) return { state: 'spraying', since: toIso(sprayingSince), lastShotAt: lastShot, clearAt: null }
  if (lastShotAt === null) return null
  const { state, clearAt } = clearanceOf({
    lastShotAt, clearanceMs: minutesToMs(facts.clearanceMin, 'up'), changes: changesOf(facts), now,
  })
  if (state === 'clear') return null
  return { state, since: null, lastShotAt: lastShot, clearAt: clearAt === null ? null : toIso(clearAt) }
}

/** Before the first change that was noted the extraction was what that change found, else what it is now. */
function changesOf({ changes, extraction }: ClearanceFacts): ExtractionChange[] {
  const [first] = changes
  const known = changes.map(({ at, extraction: to }) => ({ at, extraction: engineWord[to] }))
  return [{ at: 0, extraction: engineWord[first?.before ?? extraction] }, ...known]
}

/** How the clearance of every booth in use stands at `now`, by the booth's id. */
export async function clearances(boothId: string | null, now: number, db: Knex | Knex.Transaction): Promise<Map<string, LiveClearance | null>> {
  const facts = await findClearanceFacts(boothId, db)
  return new Map(facts.map((one) => [one.boothId, judgeClearance(one, now)]))
}
