import * as z from 'zod/mini'
import { batchStates } from '../utils/batch-states'

export const BatchState = z.enum(batchStates)
export type BatchState = z.infer<typeof BatchState>
