import { randomUUID } from 'node:crypto'
import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest'
import { sealBatch } from '../../server/services/batches'
import { discardDraft } from '../../server/services/draft-discard'
import { saveDraft } from '../../server/services/drafts'
import { draftBody, morning, poured } from '../factories/drafts'
import { openWorkshop, type Workshop } from './support/context'

let work: Workshop
beforeAll(async () => {
  work = await openWorkshop()
}, 120_000)
beforeEach(() => {
  work.clock.now = morning
})
afterAll(() => work.close())

const body = { reason: 'Not needed any more' }
const save = (components: Parameters<typeof draftBody>[1] = {}, id: string = randomUUID()) => saveDraft(work.as('sprayer'), id, draftBody(work.shop, components))
const actionsOn = (id: string) => work.admin('audit_entries').where({ subject: `batch:${id}` }).orderBy('seq').pluck<string[]>('action')
const voided = (code: string) => work.admin('voided_numbers').where({ series: 'batch', number: Number(code.slice(2)) }).select<{ reason: string, user_id: string }[]>('reason', 'user_id')

describe('discarding a draft', () => {
  it('ends it, voids its number with the reason and logs no batch', async () => {
    const { id, code } = await save({ components: [] })
    const discarded = await discardDraft(work.as('sprayer'), id, body)
    expect(discarded).toMatchObject({ id, code, state: 'discarded' })
    expect(await voided(code)).toEqual([{ reason: body.reason, user_id: discarded.mixedByUserId }])
    expect(await work.admin('batches').where({ id })).toEqual([])
    expect(await actionsOn(id)).toEqual(['draft.saved', 'draft.discarded'])
    const event = await work.admin('events').where({ subject: `batch:${id}`, type: 'pot' }).orderBy('seq', 'desc').first<{ payload: string }>('payload')
    expect(JSON.parse(event.payload)).toMatchObject({ state: 'stopped' })
  })

  it('is done once however often it is asked for', async () => {
    const { id, code } = await save({ components: [] })
    const answers = await Promise.all([1, 2, 3].map(() => discardDraft(work.as('sprayer'), id, body)))
    expect(new Set(answers.map(({ state }) => state))).toEqual(new Set(['discarded']))
    expect(await voided(code)).toHaveLength(1)
    expect(await actionsOn(id)).toEqual(['draft.saved', 'draft.discarded'])
  })

  it('refuses a cup with something in it', async () => {
    const { id, code } = await save({ components: poured(work.shop, ['12', null, null]) })
    await expect(discardDraft(work.as('sprayer'), id, body)).rejects.toMatchObject({ status: 422, code: 'something-poured' })
    expect(await voided(code)).toEqual([])
  })

  it('refuses what is in the log, what is not there and what is another person\'s', async () => {
    const { id } = await save({ components: poured(work.shop, ['12', null, null]), stopped: { at: new Date(morning).toISOString(), reason: 'Spilled' } })
    await sealBatch(work.as('sprayer'), { draftId: id })
    await expect(discardDraft(work.as('sprayer'), id, body)).rejects.toMatchObject({ status: 409, code: 'already-sealed' })
    await expect(discardDraft(work.as('sprayer'), randomUUID(), body)).rejects.toMatchObject({ status: 404 })
    const other = randomUUID()
    await saveDraft(work.as('foreman'), other, draftBody(work.shop, { components: [], mixedByUserId: work.as('foreman').principal.user?.id ?? '' }))
    await expect(discardDraft(work.as('sprayer'), other, body)).rejects.toMatchObject({ status: 403 })
  })

  it('leaves nothing to seal or to save', async () => {
    const { id } = await save({ components: [] })
    await discardDraft(work.as('sprayer'), id, body)
    await expect(sealBatch(work.as('sprayer'), { draftId: id })).rejects.toMatchObject({ status: 409, code: 'discarded' })
    await expect(save({ seq: 99 }, id)).rejects.toMatchObject({ status: 409 })
  })
})
