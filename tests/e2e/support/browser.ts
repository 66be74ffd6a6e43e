import AxeBuilder from '@axe-core/playwright'
import { chromium, type Browser, type BrowserContext, type Page } from 'playwright-core'
import { demoPassword } from '#shared/utils/demo'

export const baseUrl = process.env.BASE_URL ?? 'http://127.0.0.1:3000'

/** The four grounds that the product is made for. */
export const screens = {
  bench: { width: 1280, height: 800 },
  booth: { width: 1920, height: 1080 },
  office: { width: 1440, height: 900 },
  phone: { width: 390, height: 844 },
} as const

const flags = [
  '--no-sandbox', '--disable-gpu', '--disable-quic', '--no-first-run', '--disable-background-networking', '--disable-component-update',
  '--disable-sync', '--disable-dev-shm-usage',
]

export function launch(): Promise<Browser> {
  return chromium.launch({ executablePath: process.env.CHROMIUM_PATH ?? '/usr/bin/chromium', args: flags })
}

/** A browser of its own with one page, and everything that went wrong in it. */
export interface Visitor {
  context: BrowserContext
  page: Page
  /** Console errors, hydration faults, policy reports and thrown errors, as they came. */
  faults: string[]
  close(): Promise<void>
}

interface VisitorOptions {
  screen?: keyof typeof screens
  reducedMotion?: boolean
  /** Shifts the browser's own clock, in milliseconds. */
  clockOffMs?: number
  /** Answers of the API that are expected to fail, so that the browser's own line about them is no fault. */
  expectedStatuses?: number[]
  /** Cookies of somebody who has signed in already, as `signedInAs` gives them. */
  as?: SignedIn
  /** The network is going to be cut: the browser's own lines about that are no fault. */
  losesNetwork?: boolean
}

/** Opens a page that collects its faults. Check them with `expect(visitor.faults).toEqual([])`. */
export async function visit(browser: Browser, options: VisitorOptions = {}): Promise<Visitor> {
  const context = await browser.newContext({
    viewport: screens[options.screen ?? 'office'],
    ...(options.as ? { storageState: options.as } : {}),
    reducedMotion: options.reducedMotion ? 'reduce' : 'no-preference',
    locale: 'en-GB',
  })
  if (options.clockOffMs) {
    await context.addInitScript((off: number) => {
      const now = Date.now.bind(Date)
      Date.now = () => now() + off
    }, options.clockOffMs)
  }
  const page = await context.newPage()
  const faults: string[] = []
  const expected = options.expectedStatuses ?? []
  page.on('console', (message) => {
    const text = message.text()
    const isFault = message.type() === 'error' || /hydration|content security policy/i.test(text)
    const isExpected = expected.some((status) => text.includes(`status of ${status}`)) || (options.losesNetwork && /net::ERR_/.test(text))
    if (isFault && !isExpected) faults.push(`${message.type()}: ${text}`)
  })
  page.on('pageerror', (error) => faults.push(`thrown: ${error.message}`))
  return { context, page, faults, close: () => context.close() }
}

/** What Nuxt leaves at its root, as far as it is needed here. */
interface Root extends Element {
  __vue_app__?: { $nuxt?: { isHydrating?: boolean } }
}

/** Waits until the page that the server drew answers to presses: mounted, and what it waited for itself has come. */
export async function alive(page: Page): Promise<void> {
  await page.waitForFunction(() => document.querySelector<Root>('#__nuxt')?.__vue_app__?.$nuxt?.isHydrating === false)
}

/** Signs in through the form, as a person would. */
export async function signIn(page: Page, role: 'sprayer' | 'foreman' | 'manager', to = '/', server = baseUrl): Promise<void> {
  await page.goto(`${server}/sign-in${to === '/' ? '' : `?to=${encodeURIComponent(to)}`}`)
  await alive(page)
  await page.getByLabel('E-mail').fill(`${role}@potbell.example`)
  await page.getByLabel('Password', { exact: true }).fill(demoPassword)
  await page.getByRole('button', { name: 'Sign in', exact: true }).click()
  await page.waitForURL((url) => !url.pathname.startsWith('/sign-in'))
}

/** Cookies of one signed-in person, for pages that are not about signing in. */
export type SignedIn = Awaited<ReturnType<BrowserContext['storageState']>>

export async function signedInAs(browser: Browser, role: 'sprayer' | 'foreman' | 'manager'): Promise<SignedIn> {
  const { context, page, close } = await visit(browser)
  await signIn(page, role)
  const state = await context.storageState()
  await close()
  return state
}

/**
 * What axe finds on the page as it stands: rule and the elements that break it. WCAG 2.2 A and AA.
 *
 * @param options.colours false leaves the slowest rule out, where the same page was looked at in the same colours
 */
export async function axeFaults(page: Page, { colours = true }: { colours?: boolean } = {}): Promise<string[]> {
  const builder = new AxeBuilder({ page }).options({
    resultTypes: ['violations'],
    runOnly: ['wcag2a', 'wcag2aa', 'wcag21a', 'wcag21aa', 'wcag22aa'],
    rules: { 'color-contrast': { enabled: colours } },
  })
  const { violations } = await builder.analyze()
  return violations.flatMap(({ id, nodes }) => nodes.map(({ target }) => `${id}: ${target.join(' ')}`))
}

/** True when the page is wider than its window: something does not fit. */
export const overflowsSideways = (page: Page): Promise<boolean> =>
  page.evaluate(() => document.documentElement.scrollWidth > document.documentElement.clientWidth)
