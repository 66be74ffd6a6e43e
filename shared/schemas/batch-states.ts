import * as z from 'zod/mini'

/** Of a sealed batch. `no-pot-life`: nothing in it reacts, so nothing runs. */
export const batchStates = ['fresh', 'closing', 'life-up', 'emptied', 'stopped', 'no-pot-life'] as const
export const BatchState = z.enum(batchStates)
export type BatchState = z.infer<typeof BatchState>
