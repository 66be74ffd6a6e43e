import { randomUUID } from 'node:crypto'
import * as z from 'zod/mini'
import { DraftBody, type DraftInput } from '#shared/schemas/drafts'
import type { Shop } from './shop'

/** Where the tests' clock stands: a Tuesday morning. */
export const morning = Date.parse('2026-11-17T07:00:00.000Z')

const minuteMs = 60_000

/** An instant some minutes after `morning`, as the API writes it. */
export const minutesIn = (minutes: number): string => new Date(morning + minutes * minuteMs).toISOString()

/** Grams of base, hardener and thinner, poured a minute apart from the given minute on. */
export function poured(shop: Shop, grams: readonly (string | null)[], fromMinute = -10): DraftInput['components'] {
  const lots = [shop.lots.base, shop.lots.hardener, shop.lots.thinner]
  return grams.flatMap((one, index) => (one === null
    ? []
    : [{ index, pours: [{ lotId: lots[index] ?? '', grams: one, at: minutesIn(fromMinute + index), source: 'typed' as const, round: 0 }] }]))
}

/** The body of a draft as a bench would send it: 12 m² at 120 g/m² on the panel, 60 % of it arriving, 60 g of residue. */
export function draftBody(shop: Shop, more: Partial<DraftInput> = {}): DraftBody {
  return z.parse(DraftBody, {
    seq: 1,
    planId: randomUUID(),
    potNumber: 1,
    potCount: 1,
    mixRevisionId: shop.mixRevisionId,
    jobStepId: shop.jobStepId,
    pieceIds: shop.pieceIds,
    boothId: shop.boothId,
    gunId: shop.gunId,
    scaleId: shop.scaleId,
    mixedByUserId: shop.users.sprayer,
    plan: {
      areaM2: '12', filmWeightGsm: '120', filmWeightIs: 'deposited', coats: 1, transferEfficiencyPct: '60', reserveG: '60', scaleDivisionG: '0.1',
    },
    ...more,
  } satisfies DraftInput)
}
