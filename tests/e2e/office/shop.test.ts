import { randomUUID } from 'node:crypto'
import type { Page } from 'playwright-core'
import { describe, expect, it } from 'vitest'
import { alive, axeFaults, baseUrl } from '../support/browser'
import { useVisitors } from '../support/visitors'

const { visit, visitAs } = useVisitors()

async function add(page: Page, what: string, fill: () => Promise<void>): Promise<void> {
  await page.goto(`${baseUrl}/shop`)
  await alive(page)
  await page.getByRole('link', { name: `Add a ${what}`, exact: true }).first().click()
  await page.getByRole('heading', { level: 1, name: `New ${what}` }).waitFor()
  await fill()
  await page.getByRole('button', { name: `Add the ${what}` }).click()
}

const arrived = (page: Page) => page.waitForURL((url) => url.pathname === '/shop')

describe('a manager sets the shop up', () => {
  it('adds a booth, a gun, a scale and a sprayer, who chooses a password and finds the gun at the bench', async () => {
    const mark = randomUUID().slice(0, 6)
    const { page } = await visitAs('manager', { expectedStatuses: [409] })
    await add(page, 'booth', async () => {
      await page.getByLabel('Name (needed)', { exact: true }).fill(`Booth ${mark}`)
      await page.getByText('Measured', { exact: true }).click()
      await page.getByLabel('Measured minutes').fill('22,5')
    })
    await arrived(page)
    await add(page, 'gun', async () => {
      await page.getByLabel('Name (needed)', { exact: true }).fill('Gun 1')
      await page.getByLabel('Booth', { exact: true }).selectOption({ label: `Booth ${mark}` })
      await page.getByLabel('Flat panels').fill('120')
      await page.getByLabel('Residue a pot').fill('24')
      await page.getByLabel('Smallest fill').fill('0')
    })
    // Beside the field, first what the form itself sees, then what only the server knows; nothing typed is lost.
    await page.getByText('Give a percentage above 0 and up to 100.').waitFor()
    await page.getByLabel('Flat panels').fill('61.5')
    await page.getByRole('button', { name: 'Add the gun' }).click()
    await page.getByText(/^This name is taken/).waitFor()
    expect(await page.getByLabel('Residue a pot').inputValue()).toBe('24')
    await page.getByLabel('Name (needed)', { exact: true }).fill(`Gun ${mark}`)
    await page.getByRole('button', { name: 'Add the gun' }).click()
    await arrived(page)
    await add(page, 'scale', async () => {
      await page.getByLabel('Name (needed)', { exact: true }).fill(`Scale ${mark}`)
      await page.getByLabel('Division d').fill('0,1')
      await page.getByLabel('Capacity').fill('6200')
      await page.getByText('Simulated scale, for trying out').click()
    })
    await arrived(page)
    const email = `sprayer-${mark}@potbell.example`
    await add(page, 'person', async () => {
      await page.getByLabel('Name (needed)', { exact: true }).fill('Signe Aldermark')
      await page.getByLabel('E-mail').fill(email)
      await page.getByRole('button', { name: 'Make one up' }).click()
    })
    await page.getByRole('heading', { name: 'Pass this on to Signe Aldermark' }).waitFor()
    expect(await axeFaults(page)).toEqual([])
    const first = await page.getByText(/^[a-z0-9]{4}(-[a-z0-9]{4}){3}$/).innerText()

    const own = await visit({ screen: 'bench' })
    await own.page.goto(`${baseUrl}/sign-in`)
    await alive(own.page)
    await own.page.getByLabel('E-mail').fill(email)
    await own.page.getByLabel('Password', { exact: true }).fill(first)
    await own.page.getByRole('button', { name: 'Sign in', exact: true }).click()
    await own.page.getByRole('heading', { name: 'Choose your own password' }).waitFor()
    await own.page.goto(`${baseUrl}/bench`)
    await own.page.getByRole('heading', { name: 'Choose your own password' }).waitFor()
    await alive(own.page)
    expect(await axeFaults(own.page)).toEqual([])
    await own.page.getByLabel('The password you were given').fill(first)
    await own.page.getByLabel('New password').fill('four plain words here')
    await own.page.getByRole('button', { name: 'Change the password' }).click()
    await own.page.waitForURL((url) => url.pathname === '/bench')
    await own.page.getByRole('button', { name: 'Loose mix, no job' }).click()
    await own.page.getByRole('option', { name: new RegExp(`Gun ${mark}`) }).first().waitFor({ state: 'attached' })
  }, 120_000)

  it('is shown both values when somebody else saved first, and chooses', async () => {
    const { page } = await visitAs('manager', { expectedStatuses: [409] })
    const made = await page.request.post(`${baseUrl}/api/mixing-cups`, {
      data: { name: `Cup ${randomUUID().slice(0, 6)}`, capacityMl: '1000', fillLineMl: '850' }, headers: { 'idempotency-key': randomUUID(), 'origin': baseUrl },
    })
    const { id } = await made.json() as { id: string }
    await page.goto(`${baseUrl}/shop/cups/${id}`)
    await alive(page)
    await page.getByLabel('Fill no higher than').fill('800')
    await page.request.patch(`${baseUrl}/api/mixing-cups/${id}`, { data: { version: 1, fillLineMl: '700' }, headers: { origin: baseUrl } })
    await page.getByRole('button', { name: 'Save the mixing cup' }).click()
    const dialog = page.getByRole('dialog', { name: 'Somebody else saved this first' })
    await dialog.getByText('800').waitFor()
    await dialog.getByText('700').waitFor()
    await dialog.getByLabel(/^Yours/).check()
    await dialog.getByRole('button', { name: 'Save what is chosen' }).click()
    await arrived(page)
    expect(await (await page.request.get(`${baseUrl}/api/mixing-cups/${id}`)).json()).toMatchObject({ fillLineMl: '800', version: 3 })
  }, 60_000)
})
