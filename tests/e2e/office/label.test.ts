import { afterAll, describe, expect, it } from 'vitest'
import { createKnex } from '../../../server/database/connection'
import { recordNitro } from '../support/batch'
import { baseUrl } from '../support/browser'
import { useVisitors } from '../support/visitors'

const admin = createKnex(process.env.DATABASE_ADMIN_URL ?? '', { poolMax: 2 })
const { visitAs } = useVisitors()
afterAll(() => admin.destroy())

describe('the label of a batch in the log', () => {
  it('stands on a page that is opened by its address, with what its materials warn of', async () => {
    const id = await recordNitro(admin, null, new Date(Date.now() - 60_000))
    const { page } = await visitAs('foreman')
    await page.goto(`${baseUrl}/labels/${id}`)
    const label = page.getByRole('article', { name: /^Label of B-/ }).first()
    await label.waitFor()
    expect(await label.getByRole('img', { name: 'Flammable' }).count()).toBe(1)
    await page.getByRole('button', { name: 'Print the label', disabled: false }).waitFor()
  })
})
