import { mkdirSync } from 'node:fs'
import { join } from 'node:path'
import { chromium } from 'playwright-core'
import { ensureChromium } from './lib/chromium.mjs'
import { root } from './lib/paths.mjs'
import { Stop, main, say } from './lib/process.mjs'

/**
 * Takes the README's pictures of a running demo shop: `node scripts/pictures.mjs http://127.0.0.1:3000`. It signs in
 * as the demo's people and mixes one pot, as far as too much hardener.
 */
const folder = join(root, 'docs', 'pictures')
const screens = { bench: { width: 1280, height: 800 }, booth: { width: 1920, height: 1080 }, office: { width: 1440, height: 900 } }

async function open(browser, url, role, screen) {
  const page = await (await browser.newContext({ viewport: screens[screen] })).newPage()
  await page.goto(`${url}/sign-in`)
  await page.waitForLoadState('networkidle')
  await page.getByLabel('E-mail').fill(`${role}@potbell.example`)
  await page.getByLabel('Password', { exact: true }).fill('let the pot ring')
  await page.getByRole('button', { name: 'Sign in', exact: true }).click()
  await page.waitForURL(address => !address.pathname.startsWith('/sign-in'))
  return page
}

const shoot = (page, name) => page.screenshot({ path: join(folder, `${name}.png`) }).then(() => say(`docs/pictures/${name}.png`))

/** A coat that is ready and whose hardener asks for a mask: not every day has the same. */
async function choosePolyurethane(page) {
  const ready = page.getByRole('region', { name: 'Today\'s list' }).getByRole('button', { name: /Ready/ })
  await ready.first().waitFor()
  for (const row of await ready.all()) {
    await row.click()
    const mix = await page.getByLabel('Material', { exact: true }).evaluate(select => select.selectedOptions[0]?.label ?? '')
    if (/polyurethane/i.test(mix)) return
  }
  throw new Stop('No coat of a polyurethane is ready today: start the demo anew, or take the pictures at another hour.')
}

async function shootBench(browser, url) {
  const page = await open(browser, url, 'sprayer', 'bench')
  await choosePolyurethane(page)
  await page.waitForLoadState('networkidle')
  await shoot(page, 'bench-setup')
  await page.getByRole('button', { name: /^Start (this pot|pot 1)/ }).click()
  await page.getByRole('button', { name: /^It is stirred/ }).click()
  const reading = page.getByLabel(/^Grams of .* on the scale/)
  const target = await page.getByRole('region', { name: 'Pour', exact: true }).getByRole('button', { name: /show the sum: Target of/ }).innerText()
  const whole = /[\d\u2009]+/.exec(target)?.[0].replace(/\D/g, '') ?? '100'
  await reading.fill(String(Math.round(Number(whole) * 0.9)))
  await page.getByText('Keep pouring').first().waitFor()
  await shoot(page, 'bench-pour')
  await pourTooMuchHardener(page)
  await shoot(page, 'bench-correction')
}

const figure = text => Number((/[\d\u2009]+(?:\.\d+)?/.exec(text)?.[0] ?? '0').replace(/[^\d.]/g, ''))
const targetOn = async page => figure(await page.getByRole('region', { name: 'Pour', exact: true }).getByRole('button', { name: /show the sum: Target of/ }).innerText())

async function weigh(page, grams) {
  const reading = page.getByLabel(/^Grams of .* on the scale/)
  await reading.fill(grams.toFixed(1))
  await reading.press('Enter')
}

/** Base to its target, then a tenth too much of what follows: the correction sheet opens by itself. */
async function pourTooMuchHardener(page) {
  await weigh(page, await targetOn(page))
  await page.getByRole('button', { name: /^Next component/ }).click()
  const asked = page.getByRole('dialog').getByRole('button', { pressed: false })
  await asked.first().waitFor()
  while (await asked.count() > 0) await asked.first().click()
  await weigh(page, await targetOn(page) * 1.1)
  await page.getByRole('button', { name: /^Correct the others/ }).waitFor()
}

async function shootBooth(browser, url) {
  const page = await open(browser, url, 'foreman', 'booth')
  const { items } = await page.evaluate(() => fetch('/api/booths').then(answer => answer.json()))
  const { pots } = await page.evaluate(() => fetch('/api/live').then(answer => answer.json()))
  const booth = items.find(({ id }) => pots.some(pot => pot.boothId === id && pot.state !== 'emptied')) ?? items[0]
  await page.goto(`${url}/screen/${booth.id}`)
  await page.getByText('Connected').waitFor()
  await page.getByRole('button', { name: /arm the bell/ }).click()
  await page.locator('[data-pot]').first().waitFor()
  await shoot(page, 'booth-screen')
}

async function shootOffice(browser, url) {
  const page = await open(browser, url, 'foreman', 'office')
  for (const [path, name] of [['/batches', 'batches'], ['/jobs', 'jobs']]) {
    await page.goto(url + path)
    await page.waitForLoadState('networkidle')
    await shoot(page, name)
  }
  await page.goto(`${url}/batches`)
  await page.waitForLoadState('networkidle')
  await page.getByRole('link', { name: /^B-\d{4,}$/ }).nth(3).click()
  await page.getByRole('link', { name: 'Open the batch' }).click()
  await page.waitForURL(/\/batches\/[0-9a-f-]{36}/)
  await page.waitForLoadState('networkidle')
  await shoot(page, 'batch')
}

await main(async () => {
  const url = process.argv[2]
  if (!url) throw new Stop('Say where the demo runs: node scripts/pictures.mjs http://127.0.0.1:3000')
  mkdirSync(folder, { recursive: true })
  const browser = await chromium.launch({ executablePath: await ensureChromium(), args: ['--no-sandbox', '--disable-gpu', '--disable-dev-shm-usage', '--disable-background-networking'] })
  try {
    await shootBench(browser, url)
    await shootBooth(browser, url)
    await shootOffice(browser, url)
  }
  finally {
    await browser.close()
  }
  return 0
})
