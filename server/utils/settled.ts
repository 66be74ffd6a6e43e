import type { Context } from './context'
import { mutate, type Mutation } from './transactions'

/** Ends the transaction without a trace: what was asked for had been done before. */
class Settled<T> extends Error {
  constructor(readonly answer: () => Promise<T>) {
    super('done before')
  }
}

/**
 * `mutate` for what may have been done before by someone else. `keep` rolls back, so that no audit entry is written
 * for nothing, and answers what its argument reads after the rollback.
 */
export async function mutateUnlessDone<T>(
  ctx: Context, work: (m: Mutation, keep: (answer: () => Promise<T>) => never) => Promise<T>,
): Promise<T> {
  const keep = (answer: () => Promise<T>): never => {
    throw new Settled(answer)
  }
  try {
    return await mutate(ctx, (m) => work(m, keep))
  } catch (error) {
    if (error instanceof Settled) return (error as Settled<T>).answer()
    throw error
  }
}
