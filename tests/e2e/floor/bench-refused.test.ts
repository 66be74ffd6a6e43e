import { randomUUID } from 'node:crypto'
import { afterAll, describe, expect, it } from 'vitest'
import { demoPassword } from '#shared/utils/demo'
import { createKnex } from '../../../server/database/connection'
import { signedIn } from '../../server/support/http'
import { recordNitro } from '../support/batch'
import { labelAndLog, next, pourToTargets, reactingMix, setUpLooseMix, targetOf, untilReadyForOffline, weigh } from '../support/bench'
import { axeFaults, baseUrl, overflowsSideways } from '../support/browser'
import { useVisitors } from '../support/visitors'

const admin = createKnex(process.env.DATABASE_ADMIN_URL ?? '', { poolMax: 2 })
const { visitAs } = useVisitors()
afterAll(() => admin.destroy())

/** Two fresh tins of the mix's base; the one that expires first is the one that the bench takes. */
async function tinsOf(mixName: string): Promise<{ first: string, firstId: string, second: string }> {
  const base = await admin('mixes as m').join('mix_components as c', 'c.mix_revision_id', 'm.current_revision_id').where({ 'm.name': mixName, 'c.role': 'base' })
    .first<{ material_id: string }>('c.material_id')
  const tag = randomUUID().slice(0, 6)
  const tins = [{ id: randomUUID(), lot: `FIRST-${tag}`, days: 1 }, { id: randomUUID(), lot: `SECOND-${tag}`, days: 2 }]
  for (const { id, lot, days } of tins) {
    const at = new Date()
    const expires = new Date(at.getTime() + days * 86_400_000).toISOString().slice(0, 10)
    await admin('lots').insert({ id, material_id: base.material_id, lot_number: lot, state: 'in-use', received_on: '2026-01-02', expires_on: expires, created_at: at, updated_at: at })
    await admin('lot_movements').insert({ id: randomUUID(), lot_id: id, kind: 'received', grams: '9000', at, created_at: at })
  }
  return { first: `FIRST-${tag}`, firstId: tins[0]!.id, second: `SECOND-${tag}` }
}

describe('a tin in hand that is blocked meanwhile', () => {
  it('stops the pour with its number and the reason; the rest comes from another tin and both are in the record', async () => {
    const mix = await reactingMix(admin)
    const tins = await tinsOf(mix.name)
    const { page } = await visitAs('sprayer', { screen: 'bench', expectedStatuses: [422] })
    await page.goto(`${baseUrl}/bench`)
    await setUpLooseMix(page, mix.name, '2.1')
    await page.getByRole('region', { name: 'Components' }).getByText(tins.first).waitFor()
    const target = await targetOf(page)
    const stored = page.waitForResponse((answer) => answer.request().method() === 'PUT' && answer.ok() && (answer.request().postData() ?? '').includes('"grams":"100"'))
    await weigh(page, '100')
    await stored
    const foreman = await signedIn('foreman')
    const blocked = await foreman.post(`/api/lots/${tins.firstId}/block`, { reason: 'Lumps in it' })
    expect(blocked.status, JSON.stringify(blocked.body)).toBe(200)
    const halt = page.getByRole('alert').filter({ hasText: `Lot ${tins.first} was blocked: Lumps in it.` })
    await halt.waitFor()
    expect(await halt.innerText()).toMatch(/100\.0\sg of it are in the cup/)
    await weigh(page, target)
    expect(await page.getByRole('button', { name: /^Next component/ }).isDisabled()).toBe(true)
    expect(await axeFaults(page)).toEqual([])
    expect(await overflowsSideways(page)).toBe(false)
    await weigh(page, '100')
    await halt.getByRole('button', { name: 'Take another lot' }).click()
    await page.getByRole('dialog').getByRole('button', { name: new RegExp(tins.second) }).click()
    await halt.waitFor({ state: 'hidden' })
    await weigh(page, target)
    await next(page)
    await pourToTargets(page)
    const code = await labelAndLog(page)
    const rows = await admin('batches as b').join('batch_pours as p', 'p.batch_id', 'b.id').join('lots as l', 'l.id', 'p.lot_id')
      .where({ 'b.code': code }).whereIn('l.lot_number', [tins.first, tins.second]).orderBy('l.lot_number').select<{ lot_number: string, grams: string }[]>('l.lot_number', 'p.grams')
    expect(rows.map(({ lot_number, grams }) => [lot_number, Number(grams)])).toEqual([[tins.first, 100], [tins.second, Number((Number(target) - 100).toFixed(1))]])
  })
})

describe('a pot that was begun without a network for a booth that clashes by then', () => {
  it('is refused, and sent again by itself once the booth is recorded clean', async () => {
    const mix = await reactingMix(admin)
    const name = `Test booth ${randomUUID().slice(0, 6)}`
    const boothId = randomUUID()
    const at = new Date()
    await admin('booths').insert({ id: boothId, name, clearance_min: '30', created_at: at, updated_at: at })
    const { page, context } = await visitAs('sprayer', { screen: 'bench', losesNetwork: true, expectedStatuses: [422] })
    await page.goto(`${baseUrl}/bench`)
    await untilReadyForOffline(page)
    await page.getByRole('button', { name: 'Loose mix, no job' }).click()
    await page.getByLabel('What is it for').fill('Browser test panels')
    await page.getByLabel('Booth', { exact: true }).selectOption(boothId)
    await page.getByLabel('Material', { exact: true }).selectOption({ label: mix.name })
    await page.getByLabel('Panel area', { exact: true }).last().fill('1.4')
    await page.getByLabel('Wet coat weight', { exact: true }).fill('120')
    await context.setOffline(true)
    await page.getByRole('button', { name: /^Start this pot/ }).click()
    await page.getByRole('button', { name: /^It is stirred/ }).click()
    await recordNitro(admin, boothId, new Date(Date.now() - 10 * 60_000))
    await context.setOffline(false)
    const refused = page.getByRole('dialog').filter({ hasText: 'Not in this booth' })
    await refused.getByRole('button', { name: 'The booth is clean' }).click()
    for (const what of ['Booth walls and floor', 'Duct and fan', 'Filters changed']) await page.getByText(what).click()
    await page.getByLabel('Why').fill('Washed down, new filters')
    await page.getByLabel('Foreman\'s e-mail').fill('foreman@potbell.example')
    await page.getByLabel('Password', { exact: true }).fill(demoPassword)
    await page.getByRole('button', { name: 'Record it as clean' }).click()
    await page.getByRole('dialog').waitFor({ state: 'hidden' })
    await pourToTargets(page)
    await labelAndLog(page)
    await admin('booths').where({ id: boothId }).update({ active: false })
  })
})
