import { randomUUID } from 'node:crypto'
import type { Page } from 'playwright-core'
import { describe, expect, it } from 'vitest'
import { next, targetOf, weigh } from '../support/bench'
import { alive, axeFaults, baseUrl, overflowsSideways } from '../support/browser'
import { useVisitors } from '../support/visitors'

/** Materials, lots and mixes as a manager enters them, and the bench that hears of it. */
const { visitAs } = useVisitors()
const mark = (): string => randomUUID().slice(0, 6)

const open = async (page: Page, path: string): Promise<void> => {
  await page.goto(`${baseUrl}${path}`)
  await alive(page)
}
const press = (page: Page, name: string | RegExp): Promise<void> => page.getByRole('main').getByRole('button', { name }).first().click()
const heading = (page: Page, name: string | RegExp): Promise<void> => page.getByRole('heading', { level: 1, name }).waitFor()

/** What the page says, with plain spaces in place of thin ones and of those that do not break. */
const text = async (page: Page): Promise<string> => (await page.getByRole('main').innerText()).replace(/\s/g, ' ')

/** Enters a material through its form; answers the path of its page. */
async function enterMaterial(page: Page, code: string, role: string, density: string): Promise<string> {
  await open(page, '/materials/new')
  await page.getByLabel('Code (needed)').fill(code)
  await page.getByLabel('Name (needed)').fill(`${role} of the browser test`)
  await page.getByLabel('Role (needed)').selectOption({ label: role })
  await page.getByLabel('Chemistry (needed)').selectOption({ label: 'Polyurethane' })
  await page.getByLabel('Density', { exact: true }).fill(density)
  await press(page, 'Enter the material')
  await page.waitForURL((url) => /^\/materials\/[0-9a-f-]{36}$/.test(url.pathname))
  await heading(page, new RegExp(code))
  return new URL(page.url()).pathname
}

async function bookIn(page: Page, material: string, lot: string, amount: string, unit: string): Promise<void> {
  await open(page, material)
  await page.getByRole('main').getByRole('link', { name: 'Book in a lot' }).click()
  await page.getByLabel('Lot (needed)').fill(lot)
  await page.getByText(unit, { exact: true }).click()
  await page.getByLabel('How much (needed)').fill(amount)
  await page.getByLabel('Use by').fill('2099-03-31')
  await press(page, 'Book in the lot')
  await page.waitForURL((url) => /^\/lots\/[0-9a-f-]{36}$/.test(url.pathname))
  await heading(page, lot)
}

describe('the editors of a manager', () => {
  it('take a shop from a material over its lots to a mix and its next revision, which the bench offers without being asked', async () => {
    const [base, hardener, mix] = [`EB-${mark()}`, `EH-${mark()}`, `EM-${mark()}`]
    const [baseLot, hardenerLot] = [`K-${mark()}`, `R-${mark()}`]
    const bench = await visitAs('sprayer', { screen: 'bench' })
    await bench.page.goto(`${baseUrl}/bench`)
    await bench.page.getByRole('button', { name: 'Loose mix, no job' }).click()

    const { page } = await visitAs('manager')
    const basePath = await enterMaterial(page, base, 'Base', '1,25')
    expect(await text(page)).toContain('1.25 g/mL')
    const hardenerPath = await enterMaterial(page, hardener, 'Hardener', '1.1')
    await bookIn(page, basePath, baseLot, '5,5', 'Kilograms')
    expect(await text(page)).toMatch(/5\s?500 g/)
    await bookIn(page, hardenerPath, hardenerLot, '2.5', 'Litres')
    expect(await text(page)).toMatch(/2\s?750 g/)

    await open(page, '/mixes/new')
    await page.getByLabel('Code (needed)').fill(mix)
    await page.getByLabel('Name (needed)').fill(`Mix ${mix}`)
    await page.getByLabel('1. Material').selectOption({ label: `${base} Base of the browser test` })
    await page.getByLabel('2. Material').selectOption({ label: `${hardener} Hardener of the browser test` })
    await page.getByLabel('Ratio').fill('100:50')
    await page.getByLabel('Ratio').press('Enter')
    await page.getByRole('region', { name: 'What it comes to' }).getByRole('cell', { name: '667' }).waitFor()
    await page.getByLabel('Pot life (needed)').fill('120')
    expect(await axeFaults(page)).toEqual([])
    await press(page, 'Make the mix')
    await heading(page, new RegExp(mix))

    await page.getByRole('main').getByRole('link', { name: 'New revision' }).click()
    await heading(page, new RegExp(mix))
    await page.getByLabel('Parts (needed)', { exact: true }).nth(1).fill('25')
    await page.getByText('was 50').waitFor()
    await page.getByRole('region', { name: 'What it comes to' }).getByRole('cell', { name: '800' }).waitFor()
    await press(page, 'Save revision 2')
    await page.getByRole('link', { name: 'Show revision 1' }).click()
    await page.getByText('This is revision 1.').waitFor()
    expect(await text(page)).toContain('100 : 50')

    await bench.page.getByLabel('Material', { exact: true }).selectOption({ label: `Mix ${mix}` })
    await bench.page.getByText('100 : 25').first().waitFor()
    await bench.page.getByLabel('What is it for').fill('A first pot')
    await bench.page.getByLabel('Panel area', { exact: true }).last().fill('2.4')
    await bench.page.getByLabel('Wet coat weight', { exact: true }).fill('120')
    await press(bench.page, /^Start (this pot|pot 1)/)
    await press(bench.page, /^It is stirred/)
    await bench.page.getByText(baseLot).first().waitFor()
    await weigh(bench.page, await targetOf(bench.page))
    await next(bench.page)
    await bench.page.getByText(hardenerLot).first().waitFor()
  }, 180_000)

  it('say beside each field what is wrong, keep what was typed over a reload, and work by keyboard', async () => {
    const { page } = await visitAs('manager', { expectedStatuses: [409] })
    await open(page, '/materials/new')
    await press(page, 'Enter the material')
    await page.getByText('Give it a code.').waitFor()
    expect(await page.evaluate(() => document.activeElement?.getAttribute('aria-invalid'))).toBe('true')
    expect(await axeFaults(page)).toEqual([])

    const code = `EK-${mark()}`
    await page.getByLabel('Code (needed)').fill(code)
    await page.getByLabel('Add a statement').fill('flammable liquid')
    await page.getByRole('list', { name: 'Statements that fit' }).getByText('H226').waitFor()
    await page.getByLabel('Add a statement').fill('H226')
    await page.getByLabel('Add a statement').press('Enter')
    await page.getByRole('button', { name: 'Take off H226' }).waitFor()
    await page.reload()
    await alive(page)
    await page.getByText('What you had typed is back.').waitFor()
    expect(await page.getByLabel('Code (needed)').inputValue()).toBe(code)
    await page.getByRole('button', { name: 'Take off H226' }).waitFor()

    await page.getByLabel('Name (needed)').fill('Twice')
    await page.getByLabel('Role (needed)').selectOption({ label: 'Thinner' })
    await page.getByLabel('Chemistry (needed)').selectOption({ label: 'Acrylic' })
    await page.getByLabel('Name (needed)').press('Enter')
    await heading(page, new RegExp(code))
    await enterTwice(page, code)
  })

  it('show both values, who and when, where two people change the same thing, and lose nothing', async () => {
    const one = await visitAs('manager', { expectedStatuses: [409] })
    const path = await enterMaterial(one.page, `EC-${mark()}`, 'Thinner', '0.88')
    await open(one.page, `${path}/edit`)
    const other = await visitAs('manager')
    await open(other.page, `${path}/edit`)
    await other.page.getByLabel('Price per kg').fill('4.20')
    await press(other.page, 'Save the material')
    await other.page.waitForURL((url) => url.pathname === path)

    await one.page.getByLabel('Price per kg').fill('4.90')
    await one.page.getByLabel('Supplier').fill('Trade counter')
    await press(one.page, 'Save the material')
    const dialog = one.page.getByRole('dialog', { name: 'Somebody else saved this first' })
    await dialog.getByText('4.9', { exact: false }).first().waitFor()
    expect(await axeFaults(one.page)).toEqual([])
    await dialog.getByRole('radio', { name: /As saved/ }).check()
    await dialog.getByRole('button', { name: 'Save what is chosen' }).click()
    await one.page.waitForURL((url) => url.pathname === path)
    await one.page.getByText('Trade counter').first().waitFor()
    expect(await text(one.page)).toContain('4.20')
  })

  it('block a lot at once at the bench, count it, and fit a phone', async () => {
    const { page } = await visitAs('foreman', { screen: 'phone' })
    await open(page, '/lots?state=sealed')
    await page.getByRole('main').getByRole('link').filter({ hasText: /-\d{4}$/ }).first().click()
    await page.waitForURL((url) => /^\/lots\/[0-9a-f-]{36}$/.test(url.pathname))
    await press(page, 'Block')
    await page.getByLabel('Why (needed)').fill('Skin in the tin')
    await page.getByRole('dialog').getByRole('button', { name: 'Block the lot' }).click()
    await page.getByRole('heading', { name: 'Blocked and released' }).waitFor()
    await press(page, 'Count')
    await page.getByLabel('Weighed, without the tin (needed)').fill('1234,5')
    await page.getByLabel('Why (needed)').fill('Weighed on the shelf')
    expect(await axeFaults(page)).toEqual([])
    await page.getByRole('dialog').getByRole('button', { name: 'Write it down' }).click()
    await page.getByText('Weighed on the shelf').waitFor()
    expect(await text(page)).toMatch(/1\s?234\.5 g/)
    await press(page, 'Release')
    await page.getByLabel('Why (needed)').fill('Strained, sound')
    await page.getByRole('dialog').getByRole('button', { name: 'Release the lot' }).click()
    await page.getByText('Strained, sound').waitFor()
    expect(await overflowsSideways(page)).toBe(false)
  })

  it.each(['/materials/new', '/lots/new', '/mixes/new'])('%s fits a phone and is free of axe\'s faults there', async (path) => {
    const { page } = await visitAs('manager', { screen: 'phone' })
    await open(page, path)
    await page.locator('form input').first().waitFor()
    expect(await overflowsSideways(page)).toBe(false)
    expect(await axeFaults(page)).toEqual([])
  })

  it('leave a sprayer the booking in and nothing else', async () => {
    const { page } = await visitAs('sprayer')
    await open(page, '/materials')
    await page.getByRole('main').getByRole('link', { name: 'Book in a lot' }).waitFor()
    expect(await page.getByRole('link', { name: 'New material' }).count()).toBe(0)
    await open(page, '/mixes/new')
    await page.getByRole('heading', { name: 'A manager makes mixes' }).waitFor()
  })
})

/** The same code again is refused beside its field, with everything still there. */
async function enterTwice(page: Page, code: string): Promise<void> {
  await open(page, '/materials/new')
  await page.getByLabel('Code (needed)').fill(code)
  await page.getByLabel('Name (needed)').fill('Twice')
  await page.getByLabel('Role (needed)').selectOption({ label: 'Thinner' })
  await page.getByLabel('Chemistry (needed)').selectOption({ label: 'Acrylic' })
  await press(page, 'Enter the material')
  await page.getByText('Another material has this code.').waitFor()
  expect(await page.getByLabel('Name (needed)').inputValue()).toBe('Twice')
}
