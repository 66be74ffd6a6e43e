import * as z from 'zod/mini'
import { Uuid, words } from './fields'

/** What a person may put right on a logged batch, beside the grams and lots of its pours. */
export const plainFields = [
  'reactiveAt', 'firstSprayAt', 'lastSprayAt', 'closedAt', 'leftoverG', 'gunId', 'boothId', 'mixedByUserId', 'purpose', 'airC', 'rhPct', 'surfaceC',
  'materialC', 'viscosityCup', 'viscositySeconds', 'note',
] as const
export type PlainField = (typeof plainFields)[number]

/** `pours.COMPONENT.POSITION.grams` or `.lotId`, both counted from 0; or one of the plain fields. */
const fieldPattern = new RegExp(`^(?:${plainFields.join('|')}|pours\\.[0-7]\\.\\d{1,3}\\.(?:grams|lotId))$`)

const value = z.nullable(z.string('Give a text, or null for nothing.').check(z.trim(), z.maxLength(500, 'Use at most 500 characters.')))

/**
 * Body of `POST /api/batches/:id/amendments`. `from` is what the sender saw; it must still hold. Decimals with a point,
 * instants in UTC, ids as they are.
 */
export const AmendmentBody = z.strictObject({
  field: z.string('Say what to amend.').check(z.regex(fieldPattern, 'This cannot be amended.')),
  from: value,
  to: value,
  reason: words(400),
  approvals: z._default(z.array(Uuid).check(z.maxLength(5)), []),
})
export type AmendmentBody = z.infer<typeof AmendmentBody>
export type AmendmentInput = z.input<typeof AmendmentBody>

/** A pour's field taken apart, or null for a plain one. */
export function pourFieldOf(field: string): { index: number, position: number, what: 'grams' | 'lotId' } | null {
  const match = /^pours\.(\d)\.(\d{1,3})\.(grams|lotId)$/.exec(field)
  return match ? { index: Number(match[1]), position: Number(match[2]), what: match[3] as 'grams' | 'lotId' } : null
}
