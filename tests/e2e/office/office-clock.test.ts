import { afterAll, describe, expect, it } from 'vitest'
import { createKnex } from '../../../server/database/connection'
import { recordNitro } from '../support/batch'
import { baseUrl } from '../support/browser'
import { useVisitors } from '../support/visitors'

const admin = createKnex(process.env.DATABASE_ADMIN_URL ?? '', { poolMax: 2 })
const { visitAs } = useVisitors()
afterAll(() => admin.destroy())

describe('a desk whose clock is two days ahead', () => {
  it('lets a sprayer amend what was mixed today, and prints the sheet with the shop\'s own date', async () => {
    const id = await recordNitro(admin, null, new Date(Date.now() - 60_000))
    const { page } = await visitAs('sprayer', { clockOffMs: 48 * 3_600_000 })
    await page.goto(`${baseUrl}/batches?open=${id}`)
    await page.getByRole('button', { name: 'Amend' }).waitFor()
    const measured = page.waitForResponse((answer) => answer.url().endsWith('/api/time'))
    await page.goto(`${baseUrl}/batches/${id}/sheet`)
    await measured
    const zone = await page.request.get(`${baseUrl}/api/session`).then(async (answer) => (await answer.json() as { shop: { zone: string } }).shop.zone)
    const day = (at: number) => new Intl.DateTimeFormat('en-GB', { timeZone: zone, day: 'numeric', month: 'short' }).format(at)
    const printed = page.getByText(/printed/)
    expect(await printed.innerText()).toMatch(new RegExp(`printed \\w+ ${day(Date.now())}`))
    await page.getByRole('link', { name: 'Back to the batch' }).click()
    await page.getByRole('link', { name: 'Print sheet' }).or(page.getByRole('link', { name: /sheet/i })).first().click()
    expect(await printed.innerText()).toMatch(new RegExp(`printed \\w+ ${day(Date.now())}`))
  })
})
