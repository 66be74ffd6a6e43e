import { randomUUID } from 'node:crypto'
import { afterAll, describe, expect, it } from 'vitest'
import { demoPassword } from '#shared/utils/demo'
import { createKnex } from '../../../server/database/connection'
import { recordNitro } from '../support/batch'
import { codeOf, labelAndLog, next, pourToTargets, putOnWhatIsAsked, reactingMix, setUpLooseMix, targetOf, untilReadyForOffline, weigh } from '../support/bench'
import { axeFaults, baseUrl, overflowsSideways } from '../support/browser'
import { useVisitors } from '../support/visitors'

const admin = createKnex(process.env.DATABASE_ADMIN_URL ?? '', { poolMax: 2 })
const { visitAs } = useVisitors()
afterAll(() => admin.destroy())

const recorded = (code: string) => admin('batches').where({ code }).count<{ n: string }[]>({ n: '*' }).then(([row]) => Number(row?.n))

/** A tin of the mix's base that is out of date, with a number that nobody else has. */
async function expiredLotOf(mixName: string): Promise<string> {
  const base = await admin('mixes as m').join('mix_components as c', 'c.mix_revision_id', 'm.current_revision_id').where({ 'm.name': mixName, 'c.role': 'base' })
    .first<{ material_id: string }>('c.material_id')
  const id = randomUUID()
  const lotNumber = `OLD-${id.slice(0, 8)}`
  const at = new Date('2026-01-02T08:00:00.000Z')
  await admin('lots').insert({
    id, material_id: base.material_id, lot_number: lotNumber, state: 'in-use', received_on: '2026-01-02', expires_on: '2026-03-01', created_at: at, updated_at: at,
  })
  await admin('lot_movements').insert({ id: randomUUID(), lot_id: id, kind: 'received', grams: '4000', at, created_at: at })
  return lotNumber
}

describe('a tin that is out of date', () => {
  it('stands in the list as what it is, is allowed by a foreman with a reason, and the batch needs no review', async () => {
    const mix = await reactingMix(admin)
    const lotNumber = await expiredLotOf(mix.name)
    const { page } = await visitAs('sprayer', { screen: 'bench' })
    await page.goto(`${baseUrl}/bench`)
    await setUpLooseMix(page, mix.name, '1.7')
    await page.getByRole('button', { name: 'Another lot' }).click()
    await page.getByRole('button', { name: new RegExp(`${lotNumber}.*out of date.*needs a foreman`) }).click()
    await page.getByLabel('Why').fill('Opened yesterday, tried on a sample')
    await page.getByLabel('Foreman\'s e-mail').fill('foreman@potbell.example')
    await page.getByLabel('Password', { exact: true }).fill(demoPassword)
    await page.getByRole('button', { name: 'Approve it' }).click()
    await page.getByRole('dialog').waitFor({ state: 'hidden' })
    await page.getByRole('main').getByText(lotNumber).first().waitFor()
    await pourToTargets(page)
    const code = await labelAndLog(page)
    const row = await admin('batches as b').join('batch_pours as p', 'p.batch_id', 'b.id').join('lots as l', 'l.id', 'p.lot_id')
      .where({ 'b.code': code, 'l.lot_number': lotNumber }).first<{ review: string } | undefined>('b.review')
    expect(row && JSON.parse(row.review)).toEqual([])
  })
})

describe('a second tablet', () => {
  it('goes on at the same gram; the first one is told, writes no more, and the batch is logged once', async () => {
    const first = await visitAs('sprayer', { screen: 'bench', expectedStatuses: [409] })
    await first.page.goto(`${baseUrl}/bench`)
    const mix = await reactingMix(admin)
    await setUpLooseMix(first.page, mix.name, '2.2')
    const base = await targetOf(first.page)
    await weigh(first.page, base)
    await first.page.getByText('In tolerance').first().waitFor()
    const code = await codeOf(first.page)
    await next(first.page)

    const second = await visitAs('sprayer', { screen: 'bench' })
    await second.page.goto(`${baseUrl}/bench`)
    await second.page.getByRole('button', { name: new RegExp(`${code} is being mixed`) }).click()
    await second.page.getByRole('dialog').getByText(/g in the cup, at another tablet/).waitFor()
    await second.page.getByRole('button', { name: 'Go on with it here' }).click()
    await second.page.getByRole('region', { name: 'Pour', exact: true }).waitFor()

    await putOnWhatIsAsked(first.page)
    await weigh(first.page, '3')
    await first.page.getByRole('heading', { name: 'Taken over elsewhere' }).waitFor()
    expect(await first.page.getByRole('dialog').innerText()).toContain(`${code} was taken over`)
    await first.page.getByRole('button', { name: 'Leave it to them' }).click()
    await first.page.getByRole('button', { name: 'Loose mix, no job' }).waitFor()

    await pourToTargets(second.page)
    expect(await labelAndLog(second.page)).toBe(code)
    expect(await recorded(code)).toBe(1)
    const poured = await admin('batch_pours as p').join('batches as b', 'b.id', 'p.batch_id').where('b.code', code).orderBy('p.component_index').select<{ grams: string }[]>('p.grams')
    expect(Number(poured[0]?.grams)).toBe(Number(base))
    await first.page.reload()
    await first.page.getByRole('button', { name: 'Loose mix, no job' }).waitFor()
  })
})

describe('a booth that was last used for something that clashes', () => {
  it('holds the start back with the reason, and is free once a foreman has recorded it clean', async () => {
    const mix = await reactingMix(admin)
    const name = `Test booth ${randomUUID().slice(0, 6)}`
    const boothId = randomUUID()
    const at = new Date()
    await admin('booths').insert({ id: boothId, name, clearance_min: '30', created_at: at, updated_at: at })
    await recordNitro(admin, boothId, new Date(Date.now() - 10 * 60_000))
    const { page } = await visitAs('sprayer', { screen: 'bench' })
    await page.goto(`${baseUrl}/bench`)
    await page.getByRole('button', { name: 'Loose mix, no job' }).click()
    await page.getByLabel('What is it for').fill('Clash test')
    await page.getByLabel('Booth', { exact: true }).selectOption(boothId)
    await page.getByLabel('Material', { exact: true }).selectOption({ label: mix.name })
    await page.getByLabel('Panel area', { exact: true }).last().fill('1.4')
    await page.getByLabel('Wet coat weight', { exact: true }).fill('120')
    await page.getByText(new RegExp(`${name} was last used for nitrocellulose.*catch fire`)).waitFor()
    expect(await page.getByRole('button', { name: /^Start this pot/ }).isDisabled()).toBe(true)
    expect(await axeFaults(page)).toEqual([])
    await page.getByRole('button', { name: 'The booth is clean' }).click()
    expect(await page.getByRole('button', { name: 'Record it as clean' }).isDisabled()).toBe(true)
    for (const what of ['Booth walls and floor', 'Duct and fan', 'Filters changed']) await page.getByText(what).click()
    await page.getByLabel('Why').fill('Washed down, new filters')
    await page.getByLabel('Foreman\'s e-mail').fill('foreman@potbell.example')
    await page.getByLabel('Password', { exact: true }).fill(demoPassword)
    await page.getByRole('button', { name: 'Record it as clean' }).click()
    await page.getByRole('button', { name: /^Start this pot/, disabled: false }).click()
    await page.getByRole('heading', { name: 'Stir the base to the bottom' }).waitFor()
    await page.getByRole('button', { name: 'Stop this mix' }).click()
    await page.getByRole('button', { name: 'Spilled' }).click()
    await page.getByRole('button', { name: 'Stop and void the number' }).click()
    await admin('booths').where({ id: boothId }).update({ active: false })
  })
})

describe('a bench without network', () => {
  it('gives a batch a number of its own block at once, and it arrives under that number', async () => {
    const { page, context } = await visitAs('manager', { screen: 'bench', losesNetwork: true })
    const { id: boothId } = await admin('booths').where({ active: true }).orderBy('name').first<{ id: string }>('id')
    await page.goto(`${baseUrl}/bench`)
    const enrolled = await page.request.post(`${baseUrl}/api/devices`, {
      headers: { 'Origin': baseUrl, 'Idempotency-Key': randomUUID() }, data: { kind: 'bench', name: `Bench ${randomUUID().slice(0, 6)}`, boothId, scaleId: null },
    })
    expect(enrolled.status()).toBe(201)
    await Promise.all([page.waitForResponse((answer) => answer.url().endsWith('/api/number-blocks') && answer.ok()), page.reload()])
    await untilReadyForOffline(page)
    await context.setOffline(true)
    await page.getByText(/No connection since/).waitFor()
    const range = /B-\d{4,} to B-\d{4,}/.exec(await page.getByRole('region', { name: 'Today\'s list' }).innerText())?.[0] ?? ''
    const mix = await reactingMix(admin)
    await setUpLooseMix(page, mix.name, '1.3')
    const code = await codeOf(page)
    expect(range.startsWith(code)).toBe(true)
    await pourToTargets(page)
    await page.getByRole('button', { name: 'It is stirred and scraped' }).click()
    await page.getByRole('button', { name: /^Next: label/ }).click()
    await page.getByRole('button', { name: /^Label is on the cup/ }).click()
    await page.getByRole('heading', { name: `${code} is saved on this bench` }).waitFor()
    await context.setOffline(false)
    await page.getByRole('heading', { name: `${code} is in the log` }).waitFor()
    expect(await recorded(code)).toBe(1)
  })
})

describe('set-up', () => {
  it('goes by keyboard alone to the first weight', async () => {
    const { page } = await visitAs('sprayer', { screen: 'bench' })
    await page.goto(`${baseUrl}/bench`)
    const row = page.getByRole('region', { name: 'Today\'s list' }).getByRole('button', { name: /Ready/ }).first()
    await row.waitFor()
    await tabTo(page, () => row.evaluate((element) => element === document.activeElement))
    await page.keyboard.press('Enter')
    await tabTo(page, () => page.evaluate(() => /^Start/.test(document.activeElement?.textContent?.trim() ?? '')))
    await page.keyboard.press('Enter')
    await page.getByRole('heading', { name: 'Stir the base to the bottom' }).waitFor()
    await page.getByRole('button', { name: 'Stop this mix' }).click()
    await page.getByRole('button', { name: 'Not needed any more' }).click()
    await page.getByRole('button', { name: 'Stop and void the number' }).click()
    await page.getByRole('button', { name: 'Loose mix, no job' }).waitFor()
  })

  it('shows faults beside their fields, the area of what is left in the tin, and loses nothing', async () => {
    const { page } = await visitAs('sprayer', { screen: 'bench' })
    await page.goto(`${baseUrl}/bench`)
    const mix = await reactingMix(admin)
    await page.getByRole('button', { name: 'Loose mix, no job' }).click()
    await page.getByLabel('Material', { exact: true }).selectOption({ label: mix.name })
    await page.getByLabel('Panel area', { exact: true }).last().fill('2,4')
    await page.getByLabel('Wet coat weight', { exact: true }).fill('120')
    await page.getByLabel('Pace', { exact: true }).fill('0')
    const pace = page.getByLabel('Pace', { exact: true })
    await expect.poll(() => pace.getAttribute('aria-invalid')).toBe('true')
    await pace.fill('9')
    await page.getByLabel('Reserve', { exact: true }).fill('10')
    await page.getByText(/reserve [\d\u2009 ]+ g; pace as given here/).waitFor()
    await page.getByText('What is left in the tin').click()
    await page.getByRole('button', { name: /Lot's rest/ }).click()
    await page.getByText(/covers [\d.,\u2009]+ m²/).waitFor()
    expect(Number((await page.getByRole('textbox', { name: 'Left in the tin' }).inputValue()))).toBeGreaterThan(0)
    await page.reload()
    await page.getByRole('textbox', { name: 'Left in the tin' }).waitFor()
    expect(await page.getByLabel('Pace', { exact: true }).inputValue()).toBe('9')
    expect(await overflowsSideways(page)).toBe(false)
    expect(await axeFaults(page)).toEqual([])
  })
})

/** Presses Tab until the wanted thing has the focus. */
async function tabTo(page: { keyboard: { press(key: string): Promise<void> } }, isThere: () => Promise<boolean>): Promise<void> {
  for (let press = 0; press < 80; press++) {
    if (await isThere()) return
    await page.keyboard.press('Tab')
  }
  throw new Error('the keyboard does not get there')
}
