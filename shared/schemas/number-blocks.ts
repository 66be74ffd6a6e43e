import * as z from 'zod/mini'
import { Uuid, words } from './fields'

/** Numbers that a bench holds for work without network, first and last included. */
export const NumberBlock = z.strictObject({
  id: Uuid,
  series: z.string(),
  prefix: z.string(),
  firstNumber: z.int(),
  lastNumber: z.int(),
  /** The number after the highest used one; beyond the last when the block is used up or closed. */
  nextNumber: z.int(),
  /** From `nextNumber` on, those that no batch known to the server bears. */
  codes: z.array(z.string()),
})
export type NumberBlock = z.infer<typeof NumberBlock>

/** Body of `POST /api/number-blocks/:id/void`. */
export const NumberBlockVoidBody = z.strictObject({ reason: words(400) })
export type NumberBlockVoidBody = z.infer<typeof NumberBlockVoidBody>
