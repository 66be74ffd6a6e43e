import { randomUUID } from 'node:crypto'
import type { Knex } from 'knex'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { readConsistent } from '../../server/repositories/snapshot'
import { verifyChain } from '../../server/utils/audit'
import { mutate, type Mutation } from '../../server/utils/transactions'
import { idempotency, openWorkshop, type Workshop } from './support/context'
import { openSchema } from './support/schema'

let work: Workshop
beforeAll(async () => {
  work = await openWorkshop()
}, 120_000)
afterAll(() => work.close())

const note = (m: Mutation, subject: string) => m.audit({ action: 'test.noted', subject, facts: {} })
const unique = () => `test:${randomUUID()}`
const setting = (name: string, value: string) => ({ name, value, created_at: new Date(), updated_at: new Date() })
const settingsLike = (name: string) => work.admin('settings').where('name', 'like', `${name}%`).count<{ n: string | number }[]>({ n: '*' })

/** Resolves when it is opened. */
function gate() {
  let open: () => void = () => {}
  const opened = new Promise<void>((resolve) => {
    open = resolve
  })
  return { open, opened }
}

describe('a mutation', () => {
  /** What a transaction sees of a row before and after somebody else has committed it. */
  async function sight(trx: Knex.Transaction): Promise<number[]> {
    const name = `t-${randomUUID()}`
    const before = await trx('settings').where({ name }).select()
    await work.admin('settings').insert(setting(name, '1'))
    return [before.length, (await trx('settings').where({ name }).select()).length]
  }

  it('reads what others committed meanwhile: READ COMMITTED takes effect', async () => {
    const seen = await mutate(work.asSystem(), async (m) => {
      note(m, unique())
      return sight(m.trx)
    })
    expect(seen).toEqual([0, 1])
  })

  it('leaves the connection as it was: what reads one picture does so, and what comes after it does not', async () => {
    const { db, close } = await openSchema('services', { migrated: false, poolMax: 1 })
    const picture = await readConsistent(db, sight)
    const after = await db.transaction(sight)
    await close()
    expect([picture, after]).toEqual([[0, 0], [0, 1]])
  })

  it('writes exactly one audit entry, or nothing at all', async () => {
    const name = `t-${randomUUID()}`
    const without = mutate(work.asSystem(), (m) => m.trx('settings').insert(setting(name, '1')))
    await expect(without).rejects.toThrow('one audit entry, not 0')
    const twice = mutate(work.asSystem(), async (m) => {
      await m.trx('settings').insert(setting(name, '1'))
      note(m, unique())
      note(m, unique())
    })
    await expect(twice).rejects.toThrow('one audit entry, not 2')
    expect(Number((await settingsLike(name))[0]?.n)).toBe(0)
  })

  it('rolls back row, audit entry and event together', async () => {
    const [name, subject] = [`t-${randomUUID()}`, unique()]
    const failing = mutate(work.asSystem(), async (m) => {
      await m.trx('settings').insert(setting(name, '1'))
      note(m, subject)
      m.publish({ type: 'test', subject, boothId: null, payload: 1n })
    })
    await expect(failing).rejects.toThrow(TypeError)
    expect(Number((await settingsLike(name))[0]?.n)).toBe(0)
    expect(await work.admin('audit_entries').where({ subject })).toEqual([])
    expect(await work.admin('events').where({ subject })).toEqual([])
  })

  it('is tried again after a deadlock, and both come through', async () => {
    const [a, b] = [`t-${randomUUID()}`, `t-${randomUUID()}`]
    await work.admin('settings').insert([setting(a, '0'), setting(b, '0')])
    const [first, second] = [gate(), gate()]
    let runs = 0
    const lockBoth = (one: string, other: string, mine: ReturnType<typeof gate>, theirs: ReturnType<typeof gate>) => mutate(work.asSystem(), async (m) => {
      runs++
      await m.trx('settings').where({ name: one }).increment('version', 1)
      mine.open()
      await theirs.opened
      await m.trx('settings').where({ name: other }).increment('version', 1)
      note(m, unique())
    })
    await Promise.all([lockBoth(a, b, first, second), lockBoth(b, a, second, first)])
    expect(runs).toBe(3)
    expect(await work.admin('settings').whereIn('name', [a, b]).select('version')).toEqual([{ version: 3 }, { version: 3 }])
  })

  it('works with a pool of one connection: no query forgets its transaction', async () => {
    const { db, close } = await openSchema('services', { migrated: false, poolMax: 1 })
    const answer = await mutate({ ...work.asSystem(), db, idempotency: idempotency(randomUUID()) }, async (m) => {
      note(m, unique())
      return 'done'
    })
    await close()
    expect(answer).toBe('done')
  })

  it('wakes the pump after the commit, with the last number it gave', async () => {
    const subject = unique()
    const woken = await new Promise<number>((resolve, reject) => {
      mutate({ ...work.asSystem(), wake: resolve }, async (m) => {
        note(m, subject)
        m.publish({ type: 'test', subject, boothId: null, payload: null })
      }).catch(reject)
    })
    expect(await work.admin('events').where({ subject }).select('seq')).toEqual([{ seq: String(woken) }])
  })
})

describe('the same request again', () => {
  it('does its work once of a hundred at once and answers all alike', async () => {
    const [key, subject] = [randomUUID(), unique()]
    let runs = 0
    const answers = await Promise.all(Array.from({ length: 100 }, () =>
      mutate({ ...work.asSystem(), idempotency: idempotency(key) }, async (m) => {
        runs++
        note(m, subject)
        return { token: randomUUID() }
      })))
    expect(new Set(answers.map(({ token }) => token)).size).toBe(1)
    expect(runs).toBe(1)
    expect(await work.admin('audit_entries').where({ subject })).toHaveLength(1)
  })

  it('does its work when the first try failed', async () => {
    const [key, subject] = [randomUUID(), unique()]
    const ctx = { ...work.asSystem(), idempotency: idempotency(key) }
    await expect(mutate(ctx, () => Promise.reject(new Error('power cut')))).rejects.toThrow('power cut')
    await mutate(ctx, async (m) => note(m, subject))
    expect(await work.admin('audit_entries').where({ subject })).toHaveLength(1)
  })

  it('is another request for another principal or body', async () => {
    const key = randomUUID()
    const run = (ctx = work.asSystem(), hash = 'a'.repeat(64)) => mutate({ ...ctx, idempotency: idempotency(key, hash) }, async (m) => {
      note(m, unique())
      return randomUUID()
    })
    const first = await run()
    expect(await run()).toBe(first)
    expect(await run(work.as('sprayer'))).not.toBe(first)
    await expect(run(work.asSystem(), 'b'.repeat(64))).rejects.toMatchObject({ status: 422, code: 'idempotency-key-reused' })
  })
})

describe('eight writers at once', () => {
  it('number entries and events in the order in which they commit, without a gap that fills later', async () => {
    const before = Number((await work.admin('ledger_head').first<{ seq: string }>('seq')).seq)
    const subject = unique()
    const seen: number[] = []
    let writing = true
    // A reader that asks only for what lies after the last number it saw, as the pump does: it must miss none.
    const reader = (async () => {
      let last = before
      for (let rest = 1; writing || rest > 0;) {
        const rows = await work.db('events').where('seq', '>', last).where({ subject }).orderBy('seq').select<{ seq: string }[]>('seq')
        seen.push(...rows.map(({ seq }) => Number(seq)))
        last = seen.at(-1) ?? last
        if (!writing) rest--
      }
    })()
    const writers = Array.from({ length: 8 }, async (_, writer) => {
      for (let turn = 0; turn < 15; turn++) {
        await mutate(work.asSystem(), async (m) => {
          await m.trx('settings').insert(setting(`t-${randomUUID()}`, String(writer)))
          note(m, subject)
          for (let event = 0; event <= turn % 3; event++) m.publish({ type: 'test', subject, boothId: null, payload: { writer, turn, event } })
        })
      }
    })
    await Promise.all(writers)
    writing = false
    await reader
    const stored = await work.admin('events').where({ subject }).orderBy('seq').select<{ seq: string; payload: string }[]>('seq', 'payload')
    expect(stored).toHaveLength(8 * 30)
    expect(seen).toEqual(stored.map(({ seq }) => Number(seq)))
    const turns = new Map<number, number[]>()
    for (const { payload } of stored) {
      const { writer, turn } = JSON.parse(payload) as { writer: number; turn: number }
      turns.set(writer, [...(turns.get(writer) ?? []), turn])
    }
    for (const order of turns.values()) expect(order).toEqual([...order].sort((a, b) => a - b))
    const head = await work.admin('ledger_head').first<{ seq: string }>('seq')
    expect(Number(head.seq) - before).toBe(8 * 30 + 8 * 15)
    expect(await verifyChain(work.db)).toMatchObject({ ok: true })
  }, 60_000)
})
