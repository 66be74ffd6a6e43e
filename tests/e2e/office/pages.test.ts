import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { createKnex } from '../../../server/database/connection'
import { alive, axeFaults, baseUrl, overflowsSideways, screens, signIn } from '../support/browser'
import { logWithOlderRows } from '../support/list'
import { useVisitors } from '../support/visitors'

const admin = createKnex(process.env.DATABASE_ADMIN_URL ?? '', { poolMax: 1 })
const { visit, visitAs } = useVisitors()
afterAll(() => admin.destroy())

/** Tables whose newest row has a page of its own. */
const things = ['batches', 'jobs', 'materials', 'lots', 'mixes', 'schedules'] as const

/** Editors of the shop, where their things lie in the database. */
const editors = { booths: 'booths', guns: 'guns', scales: 'scales', cups: 'mixing_cups', people: 'users' } as const
const ids = new Map<string, string>()

beforeAll(async () => {
  for (const table of [...things, ...Object.values(editors)]) {
    const row = await admin(table).orderBy('id').first<{ id: string }>('id')
    ids.set(table, row.id)
  }
})

/** Addresses that belong together, with the table of what has a page of its own. */
const looked: (readonly [name: string, paths: readonly string[], table: string])[] = [
  ...things.map((table) => [table, [`/${table}`, `/${table}/:id`], table] as const),
  ['shop', ['/shop', '/shop/settings', '/shop/me'], ''],
  ...Object.entries(editors).map(([path, table]) => [`shop/${path}`, [`/shop/${path}/new`, `/shop/${path}/:id`], table] as const),
]

describe('office pages', () => {
  it.each(looked)('%s: each has a heading, fits desk and phone, and axe finds nothing', async (_name, paths, table) => {
    const { page } = await visitAs('manager')
    for (const path of paths) {
      await page.setViewportSize(screens.office)
      await page.goto(baseUrl + path.replace(':id', ids.get(table) ?? ''))
      await page.getByRole('heading', { level: 1 }).waitFor()
      expect(await overflowsSideways(page), path).toBe(false)
      expect(await axeFaults(page), path).toEqual([])
      await page.setViewportSize(screens.phone)
      expect(await overflowsSideways(page), path).toBe(false)
      expect(await axeFaults(page, { colours: false }), path).toEqual([])
    }
  })
})

describe('signing in', () => {
  it('says what is wrong beside the field, keeps what was typed, and axe finds nothing', async () => {
    const { page } = await visit({ screen: 'phone', expectedStatuses: [401] })
    await page.goto(`${baseUrl}/sign-in`)
    await alive(page)
    await page.getByRole('button', { name: 'Sign in', exact: true }).click()
    expect(await page.getByLabel('E-mail').getAttribute('aria-invalid')).toBe('true')
    await page.getByLabel('E-mail').fill('foreman@potbell.example')
    await page.getByLabel('Password', { exact: true }).fill('not this')
    await page.getByRole('button', { name: 'Sign in', exact: true }).click()
    await page.getByText('This e-mail address and password do not go together.').waitFor()
    expect(await page.getByLabel('E-mail').inputValue()).toBe('foreman@potbell.example')
    expect(await axeFaults(page)).toEqual([])
    expect(await overflowsSideways(page)).toBe(false)
  })

  it('leads back to the page that was asked for, and never to another site', async () => {
    const { page } = await visit()
    await page.goto(`${baseUrl}/jobs?state=done`)
    await page.waitForURL((url) => url.pathname === '/sign-in')
    await signIn(page, 'foreman', '/jobs?state=done')
    expect(new URL(page.url()).pathname + new URL(page.url()).search).toBe('/jobs?state=done')
    const other = await visit()
    await signIn(other.page, 'foreman', '//elsewhere.example/')
    expect(new URL(other.page.url()).origin).toBe(baseUrl)
  })
})

describe('a list', () => {
  it('says when nothing fits its filters and clears them', async () => {
    const { page } = await visitAs('foreman')
    await page.goto(`${baseUrl}/batches?from=2001-01-01&to=2001-01-02`)
    await alive(page)
    await page.getByRole('heading', { name: 'No batch fits these filters' }).waitFor()
    await page.getByRole('main').getByRole('button', { name: 'Clear all filters' }).click()
    await page.getByRole('row').nth(5).waitFor()
    expect(new URL(page.url()).search).toBe('')
  })

  it('says when the server does not answer, and reads again when asked', async () => {
    const { page } = await visitAs('foreman', { expectedStatuses: [503] })
    await page.goto(`${baseUrl}/batches`)
    await alive(page)
    await page.route('**/api/batches?*', (route) => route.fulfill({ status: 503, json: { code: 'away', message: 'Away for a moment.', fields: [] } }))
    await page.getByText('Deviations only').click()
    await page.getByText('Away for a moment.').waitFor()
    await page.unroute('**/api/batches?*')
    await page.getByRole('button', { name: 'Try again' }).click()
    await page.getByRole('row').nth(2).waitFor()
  })

  it('goes by keyboard: arrows move, Enter opens beside the list, and older rows come below', async () => {
    const { page } = await visitAs('foreman')
    const { rows } = await logWithOlderRows(page)
    await rows.first().focus()
    await page.keyboard.press('ArrowDown')
    await page.keyboard.press('Enter')
    await page.waitForURL((url) => /^[0-9a-f-]{36}$/.test(url.searchParams.get('open') ?? ''))
  })

  it('shows the sum behind a total when it is opened', async () => {
    const { page } = await visitAs('foreman')
    await page.goto(`${baseUrl}/batches/${ids.get('batches')}`)
    await alive(page)
    await page.getByRole('button', { name: /show the sum: How the grams were reckoned/ }).click()
    await page.getByRole('dialog', { name: 'How the grams were reckoned' }).waitFor()
  })
})

describe('the error page', () => {
  it('says in plain words that there is nothing at an address', async () => {
    const { page } = await visitAs('foreman', { expectedStatuses: [404] })
    await page.goto(`${baseUrl}/no-such-page`)
    await page.getByRole('heading', { name: 'There is nothing at this address' }).waitFor()
    expect(await axeFaults(page)).toEqual([])
  })
})
