import { randomUUID } from 'node:crypto'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { findDue, nextDue } from '../../server/repositories/due-timers'
import { findTimerOf } from '../../server/repositories/timers'
import { saveDraft } from '../../server/services/drafts'
import { settleDue } from '../../server/services/due-timers'
import { draftBody, poured } from '../factories/drafts'
import { openLiveShop, type LiveShop } from './support/live'

let live: LiveShop
beforeAll(async () => { live = await openLiveShop('due') }, 120_000)
afterAll(() => live.drop())

/** Resolves when a timer's transaction stands before the draft's lock. Without a lock nobody ever stands there. */
async function timerWaits(): Promise<void> {
  const late = AbortSignal.timeout(10_000)
  for (;;) {
    late.throwIfAborted()
    const waiting = await live.db('information_schema.processlist').where('info', 'like', 'select `state` from `batch_drafts`%for update').where('time_ms', '>', 50).first('id')
    if (waiting) return
  }
}

describe('a timer that comes due while its batch is being sealed', () => {
  it('waits for the end of that and then looks at what the pot is', async () => {
    const id = randomUUID()
    const at = new Date(live.time.now).toISOString()
    const components = (poured(live.shop, ['100', '50', '20']) ?? []).map((one) => ({ ...one, pours: one.pours.map((pour) => ({ ...pour, at })) }))
    await saveDraft(live.as('sprayer'), id, draftBody(live.shop, { components, reactiveAt: at, plan: { totalG: '170', scaleDivisionG: '0.1' } }))
    const timer = await findTimerOf('pot-up', 'batch', id, live.db)
    live.time.now += 121 * 60_000
    const sealing = await live.admin.transaction()
    await sealing('batch_drafts').where({ id }).update({ state: 'stopped' })
    const settling = settleDue(live.as('sprayer'), { id: timer?.id ?? '', action: 'fire' })
    await timerWaits()
    // Who holds the pot takes its timers after it: they must be free.
    expect(await sealing.select('id').from('timers').where({ id: timer?.id }).forUpdate().noWait()).toHaveLength(1)
    await sealing.commit()
    expect(await settling).toBe(true)
    expect(await findTimerOf('pot-up', 'batch', id, live.db)).toMatchObject({ state: 'cancelled' })
  })
})

describe('a pot that nobody empties from Friday to Monday', () => {
  it('is called out a dozen times and not each minute', async () => {
    const id = randomUUID()
    const at = new Date(live.time.now).toISOString()
    const components = (poured(live.shop, ['100', '50', '20']) ?? []).map((one) => ({ ...one, pours: one.pours.map((pour) => ({ ...pour, at })) }))
    await saveDraft(live.as('sprayer'), id, draftBody(live.shop, { components, reactiveAt: at, plan: { totalG: '170', scaleDivisionG: '0.1' } }))
    const timer = await findTimerOf('pot-up', 'batch', id, live.db)
    const monday = live.time.now + 64 * 3_600_000
    for (let next = await nextDue(live.db); next !== null && next <= monday; next = await nextDue(live.db)) {
      live.time.now = Math.max(live.time.now, next)
      for (const work of await findDue(live.time.now, 50, live.db)) await settleDue(live.as('sprayer'), work)
    }
    const calls = await live.admin('audit_entries').where({ action: 'timer.announced', subject: `timer:${timer?.id}` }).orderBy('seq').pluck<Date[]>('at')
    const fired = Date.parse((await findTimerOf('pot-up', 'batch', id, live.db))?.firedAt ?? '')
    expect(calls.map((call) => (call.getTime() - fired) / 60_000)).toEqual([1, 2, 4, 8, 16, 32, 64, 128, 256, 512, 1024, 2048])
  })
})
