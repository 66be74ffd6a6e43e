import * as z from 'zod/mini'
import { InstantText, Uuid } from './fields'

/** A chemistry whose overspray lies in a booth, its duct or filters, with the last mix that brought it. */
export const BoothPast = z.strictObject({ chemistry: z.string(), mixName: z.string(), at: InstantText })
export type BoothPast = z.infer<typeof BoothPast>

/** What was sprayed in a booth since it was last recorded clean, the latest first. */
export const BoothChemistry = z.strictObject({
  boothId: Uuid,
  boothName: z.string(),
  past: z.array(BoothPast),
  cleanedAt: z.nullable(InstantText),
  cleanedByName: z.nullable(z.string()),
})
export type BoothChemistry = z.infer<typeof BoothChemistry>

const cleaned = (what: string) => z.literal(true, `Tick the ${what} once it is clean.`)

/** Body of `POST /api/booths/:id/clean`. A sprayer sends the id of a foreman's word for it. */
export const BoothCleanBody = z.strictObject({
  booth: cleaned('booth'),
  duct: cleaned('duct'),
  filters: z.literal(true, 'Tick the filters once they are changed or clean.'),
  approvalId: z._default(z.nullable(Uuid), null),
})
export type BoothCleanBody = z.infer<typeof BoothCleanBody>

/** What a signed-in foreman ticks before a booth is recorded clean. */
export const BoothCleanForm = z.pick(BoothCleanBody, { booth: true, duct: true, filters: true })
