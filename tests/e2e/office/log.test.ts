import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { createKnex } from '../../../server/database/connection'
import { alive, axeFaults, baseUrl, overflowsSideways, screens } from '../support/browser'
import { logWithOlderRows } from '../support/list'
import { useVisitors } from '../support/visitors'

const admin = createKnex(process.env.DATABASE_ADMIN_URL ?? '', { poolMax: 1 })
const { visitAs } = useVisitors()
afterAll(() => admin.destroy())

/** A batch that was emptied, and one whose review is opened anew for the test. */
const batches = { emptied: { id: '', code: '' }, review: { id: '', code: '' } }
let lotNumber = ''

beforeAll(async () => {
  const emptied = await admin('batches as b').join('batch_current as c', 'c.batch_id', 'b.id').where({ 'c.state': 'emptied', 'c.amended': false })
    .whereNotNull('c.last_spray_at').orderBy('b.mixed_at', 'desc').orderBy('b.id').first<{ id: string; code: string }>('b.id', 'b.code')
  const review = await admin('batches as b').where('b.review', '["out-of-tolerance"]').orderBy('b.mixed_at').first<{ id: string; code: string }>('b.id', 'b.code')
  const lot = await admin('batch_pours as p').join('lots as l', 'l.id', 'p.lot_id').where('p.batch_id', emptied.id).orderBy('p.component_index').first<{ lot_number: string }>('l.lot_number')
  Object.assign(batches, { emptied, review })
  lotNumber = lot.lot_number
})

describe('the log of batches', () => {
  it('lets the foreman find a batch by its lot, amend when it was emptied and see what it said', async () => {
    const { page } = await visitAs('foreman')
    await page.goto(`${baseUrl}/batches`)
    await alive(page)
    await page.keyboard.press('/')
    await page.keyboard.type(lotNumber)
    await page.getByRole('button', { name: `Clear: Lot ${lotNumber}` }).waitFor()
    await page.locator('tr[data-row]', { hasText: batches.emptied.code }).click()
    const drawer = page.getByRole('dialog', { name: batches.emptied.code })
    await drawer.getByRole('heading', { name: 'From mix to empty' }).waitFor()
    expect(new URL(page.url()).searchParams.get('open')).toBe(batches.emptied.id)
    expect(await axeFaults(page)).toEqual([])
    await drawer.getByRole('button', { name: 'Amend', exact: true }).click()
    const dialog = page.getByRole('dialog', { name: `Amend ${batches.emptied.code}` })
    await dialog.getByLabel('What to put right').selectOption({ label: 'Emptied time' })
    const before = await dialog.getByLabel('It should say').inputValue()
    const minute = before.slice(14, 16) === '59' ? '58' : '59'
    await dialog.getByLabel('It should say').fill(`${before.slice(0, 14)}${minute}:00`)
    await dialog.getByLabel('Why').fill('Noted when the gun was flushed')
    expect(await axeFaults(page)).toEqual([])
    await dialog.getByRole('button', { name: 'Amend it' }).click()
    await dialog.waitFor({ state: 'hidden' })
    const line = drawer.locator('[data-amendment]', { hasText: 'Emptied time' })
    await line.waitFor()
    expect(await line.locator('s').innerText()).toContain(before.slice(11, 16))
    expect(await line.innerText()).toContain('Noted when the gun was flushed')
    await page.locator('tr[data-selected]').getByText('amended').waitFor()
    const [row] = await admin('amendments').where({ batch_id: batches.emptied.id, field: 'closedAt' })
    expect(row).toMatchObject({ reason: 'Noted when the gun was flushed' })
  }, 120_000)

  it('says beside the field why a value cannot be, and keeps what was typed', async () => {
    const { page } = await visitAs('foreman', { expectedStatuses: [422] })
    await page.goto(`${baseUrl}/batches/${batches.emptied.id}`)
    await alive(page)
    await page.getByRole('button', { name: 'Amend', exact: true }).click()
    const dialog = page.getByRole('dialog', { name: /^Amend/ })
    await dialog.getByLabel('What to put right').selectOption({ label: 'Emptied time' })
    await dialog.getByLabel('It should say').fill('2020-01-01T12:00:00')
    await dialog.getByLabel('Why').fill('Wrong day')
    await dialog.getByRole('button', { name: 'Amend it' }).click()
    await dialog.getByText(/That cannot be:/).waitFor()
    expect(await dialog.getByLabel('It should say').inputValue()).toContain('2020-01-01T12:00')
    expect(await dialog.getByLabel('Why').inputValue()).toBe('Wrong day')
  })

  it('opens neighbours with the arrows, closes with Escape and gives the keyboard back to the list', async () => {
    const { page } = await visitAs('foreman')
    await page.goto(`${baseUrl}/batches`)
    await alive(page)
    const rows = page.locator('tr[data-row]')
    await rows.nth(1).click()
    const opened = () => new URL(page.url()).searchParams.get('open')
    await page.waitForURL((url) => url.searchParams.has('open'))
    const first = opened()
    await page.getByRole('dialog').getByRole('heading', { name: 'Amendments' }).waitFor()
    await page.keyboard.press('ArrowDown')
    await page.waitForURL((url) => url.searchParams.get('open') !== first)
    await page.keyboard.press('ArrowUp')
    await page.waitForURL((url) => url.searchParams.get('open') === first)
    await page.keyboard.press('Escape')
    await page.waitForURL((url) => !url.searchParams.has('open'))
    expect(await page.evaluate(() => document.activeElement?.matches('tr[data-row]'))).toBe(true)
  })

  it('says which filter to clear when several fit nothing together', async () => {
    const { page } = await visitAs('foreman')
    await page.goto(`${baseUrl}/batches?lot=no-such-lot&state=emptied`)
    await alive(page)
    await page.getByText('There are batches without “Lot no-such-lot”.').waitFor()
    await page.getByRole('main').getByRole('button', { name: 'Clear Lot no-such-lot', exact: true }).click()
    await page.locator('tr[data-row]').first().waitFor()
    expect(new URL(page.url()).search).toBe('?state=emptied')
  })

  it('keeps its rows and its place on the way back from a batch', async () => {
    const { page } = await visitAs('foreman')
    const { rows, first } = await logWithOlderRows(page)
    await rows.nth(first + 5).click()
    await page.getByRole('dialog').getByRole('link', { name: 'Open the batch' }).click()
    await page.waitForURL((url) => /^\/batches\/[0-9a-f-]{36}$/.test(url.pathname))
    await page.goBack()
    await rows.nth(first + 5).waitFor()
    expect(await rows.count()).toBeGreaterThan(first)
  })

  it('settles a review with a reason, and the list of those that wait gets shorter', async () => {
    await admin('batch_events').where({ batch_id: batches.review.id, kind: 'review-settled' }).delete()
    await admin('batch_current').where({ batch_id: batches.review.id }).update({ review_open: true })
    const { page } = await visitAs('foreman')
    await page.goto(`${baseUrl}/batches`)
    await alive(page)
    await page.getByRole('search').getByText('Needs review').click()
    await page.locator('tr[data-row]', { hasText: batches.review.code }).click()
    const drawer = page.getByRole('dialog', { name: batches.review.code })
    await drawer.getByText('A component is out of tolerance and nobody approved it.').waitFor()
    await drawer.getByRole('button', { name: 'Settle the review' }).click()
    const dialog = page.getByRole('dialog', { name: `Settle the review of ${batches.review.code}` })
    await dialog.getByLabel('What came of it').fill('Test panel hard after a week')
    expect(await axeFaults(page)).toEqual([])
    await dialog.getByRole('button', { name: 'Settle it' }).click()
    await drawer.getByText('Test panel hard after a week').waitFor()
    await page.locator('tr[data-row]', { hasText: batches.review.code }).waitFor({ state: 'detached' })
    expect(await admin('batch_current').where({ batch_id: batches.review.id }).first('review_open')).toEqual({ review_open: 0 })
  })

  it('exports what the filters show', async () => {
    const { page } = await visitAs('foreman')
    await page.goto(`${baseUrl}/batches?state=stopped`)
    await alive(page)
    const count = await page.locator('tr[data-row]').count()
    const [download] = await Promise.all([page.waitForEvent('download'), page.getByRole('link', { name: 'Export table' }).click()])
    expect(download.suggestedFilename()).toMatch(/^batches-to-\d{4}-\d\d-\d\d\.csv$/)
    const table = await (await download.createReadStream()).toArray()
    expect(Buffer.concat(table as Buffer[]).toString('utf8').match(/^B-\d+,/gm)).toHaveLength(count)
  })
})

describe('a batch on its page, on the phone and on paper', () => {
  it('opens every worked-out figure to its sum', async () => {
    const { page } = await visitAs('foreman')
    await page.goto(`${baseUrl}/batches/${batches.emptied.id}`)
    await alive(page)
    const row = page.getByRole('table', { name: 'What was meant and what was poured' }).locator('tr[data-row]').nth(1)
    await row.getByRole('button', { name: /off the ratio/ }).click()
    const sum = page.getByRole('dialog', { name: /off the ratio/ })
    await sum.getByText(/− 1$/).waitFor()
    expect(await axeFaults(page)).toEqual([])
  })

  it('fills the phone, fits it, and axe finds nothing there', async () => {
    const { page } = await visitAs('foreman', { screen: 'phone' })
    await page.goto(`${baseUrl}/batches?open=${batches.emptied.id}`)
    await alive(page)
    const drawer = page.getByRole('dialog', { name: batches.emptied.code })
    await drawer.getByRole('heading', { name: 'Amendments' }).waitFor()
    expect((await drawer.boundingBox())?.width).toBe(screens.phone.width)
    expect(await overflowsSideways(page)).toBe(false)
    expect(await axeFaults(page)).toEqual([])
    await page.goto(`${baseUrl}/batches/${batches.emptied.id}/sheet`)
    await page.getByRole('heading', { level: 1, name: batches.emptied.code }).waitFor()
    expect(await axeFaults(page)).toEqual([])
  })

  it('offers no amending to a sprayer after the day is over', async () => {
    const { page } = await visitAs('sprayer')
    const old = await admin('batches').orderBy('mixed_at').first<{ id: string }>('id')
    await page.goto(`${baseUrl}/batches/${old.id}`)
    await alive(page)
    await page.getByRole('heading', { level: 1 }).waitFor()
    expect(await page.getByRole('button', { name: 'Amend', exact: true }).count()).toBe(0)
    expect(await page.getByRole('button', { name: 'Settle the review' }).count()).toBe(0)
  })
})
