import { randomUUID } from 'node:crypto'
import type { Knex } from 'knex'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { entryHash, verifyChain, type ChainVerdict } from '../../server/utils/audit'
import { canonicalJson } from '../../server/utils/canonical'
import { toldClock } from '../../server/utils/clock'
import { mutate } from '../../server/utils/transactions'
import { morning } from '../factories/drafts'
import { openSchema, type Schema } from './support/schema'

const length = 60
let schema: Schema
let rows: Record<string, unknown>[]

beforeAll(async () => {
  schema = await openSchema(`chain_${randomUUID().slice(0, 8)}`)
  const ctx = { db: schema.db, clock: toldClock(() => morning), principal: { kind: 'system', user: null, device: null } as const, requestId: 'test', wake: () => {} }
  for (let entry = 0; entry < length; entry++) {
    await mutate(ctx, async (m) => {
      m.audit({ action: 'test.entry', subject: `test:${entry}`, facts: { grams: '1450.5', entry } })
      // Events take numbers too: the chain has gaps where they stand.
      if (entry % 3 === 0) m.publish({ type: 'test', subject: `test:${entry}`, boothId: null, payload: null })
    })
  }
  rows = await schema.admin('audit_entries').orderBy('seq').select()
}, 120_000)
afterAll(() => schema.drop())

const seqs = () => rows.map((row) => Number(row.seq))
const seqAt = (index: number) => seqs()[index] ?? 0

const undone = new Error('undone')

/** What the check says of a chain that was changed by hand; the change is undone afterwards. */
async function after(change: (trx: Knex.Transaction) => Promise<unknown>): Promise<ChainVerdict> {
  let verdict: ChainVerdict | undefined
  await schema.admin.transaction(async (trx) => {
    await change(trx)
    verdict = await verifyChain(trx)
    throw undone
  }).catch((error: unknown) => {
    if (error !== undone) throw error
  })
  if (!verdict) throw new Error('nothing was said of the chain')
  return verdict
}

const entries = (trx: Knex.Transaction) => trx('audit_entries')
const at = (index: number, trx: Knex.Transaction) => entries(trx).where({ seq: seqAt(index) })
const everywhere = Array.from({ length }, (_, index) => index)

describe('the chain of the audit', () => {
  it('is whole as written, numbered around the events', async () => {
    expect(await verifyChain(schema.db)).toEqual({ ok: true, entries: length, firstBadSeq: null, fault: null })
    expect(seqAt(1) - seqAt(0)).toBe(2)
    expect(seqAt(2) - seqAt(1)).toBe(1)
  })

  it('is of canonical bytes: sorted keys, no white space', () => {
    const bytes = String(rows[0]?.bytes)
    expect(bytes).toBe(canonicalJson(JSON.parse(bytes)))
    expect(bytes).toContain('"facts":{"entry":0,"grams":"1450.5"}')
  })

  it('names any entry whose bytes were changed', async () => {
    for (const index of everywhere) {
      const verdict = await after((trx) => at(index, trx).update({ bytes: String(rows[index]?.bytes).replace('1450.5', '1450.6') }))
      expect(verdict).toMatchObject({ ok: false, firstBadSeq: seqAt(index), fault: 'its bytes are not what was hashed' })
    }
  }, 60_000)

  it('names the entry after one whose hash was made to fit the changed bytes', async () => {
    for (const index of everywhere.slice(0, -1)) {
      const bytes = String(rows[index]?.bytes).replace('1450.5', '1450.6')
      const hash = entryHash(String(rows[index]?.prev_hash), seqAt(index), bytes)
      const verdict = await after((trx) => at(index, trx).update({ bytes, hash }))
      expect(verdict).toMatchObject({ ok: false, firstBadSeq: seqAt(index + 1), fault: 'it does not follow the entry before it' })
    }
  }, 60_000)

  it('names the entry after one that was deleted', async () => {
    for (const index of everywhere.slice(0, -1)) {
      expect(await after((trx) => at(index, trx).delete())).toMatchObject({ ok: false, firstBadSeq: seqAt(index + 1) })
    }
  }, 60_000)

  it('misses a tail that was cut off, by the head', async () => {
    const verdict = await after((trx) => entries(trx).where('seq', '>', seqAt(length - 4)).delete())
    expect(verdict).toMatchObject({ ok: false, fault: 'the end of the chain is not what the head says' })
  })

  it('names an entry that was inserted, even one that fits the entry before it', async () => {
    for (const index of everywhere.filter((one) => one % 3 === 0)) {
      const before = rows[index]
      const seq = seqAt(index) + 1
      const bytes = String(before?.bytes)
      const forged = { ...before, seq, prev_hash: before?.hash, bytes, hash: entryHash(String(before?.hash), seq, bytes) }
      const verdict = await after((trx) => entries(trx).insert(forged))
      const next = index === length - 1 ? seq + 1 : seqAt(index + 1)
      expect(verdict).toMatchObject({ ok: false, firstBadSeq: next })
    }
  }, 60_000)

  it('names the first of two entries that were swapped', async () => {
    for (const index of everywhere.slice(0, -1)) {
      const [one, other] = [rows[index], rows[index + 1]]
      const verdict = await after(async (trx) => {
        await entries(trx).whereIn('seq', [seqAt(index), seqAt(index + 1)]).delete()
        await entries(trx).insert([{ ...one, seq: other?.seq }, { ...other, seq: one?.seq }])
      })
      expect(verdict).toMatchObject({ ok: false, firstBadSeq: seqAt(index) })
    }
  }, 60_000)

  it.each([
    ['action', 'test.other'], ['actor', 'user:nobody'], ['subject', 'test:other'], ['format', 2], ['at', new Date(morning + 1)],
  ])('names an entry whose %s column tells another story than its bytes', async (column, value) => {
    const verdict = await after((trx) => at(20, trx).update({ [column]: value }))
    expect(verdict).toMatchObject({ ok: false, firstBadSeq: seqAt(20), fault: `its ${column} column is not what was audited` })
  })
})
