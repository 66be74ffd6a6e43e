import { join } from 'node:path'
import type { Browser } from 'playwright-core'
import { afterAll, afterEach, beforeAll, expect } from 'vitest'
import { launch, signedInAs, visit, type SignedIn, type Visitor } from './browser'

interface Visitors {
  /** Opens a browser of somebody of their own. */
  visit: (options?: Parameters<typeof visit>[1]) => Promise<Visitor>
  /** Opens one in which the person is signed in already. */
  visitAs: (role: 'sprayer' | 'foreman' | 'manager', options?: Parameters<typeof visit>[1]) => Promise<Visitor>
}

/**
 * Gives a test file its browser and browsers of people, and fails a test in which any of them saw a console error, a
 * hydration fault, a policy report or a thrown error. With `E2E_PICTURES=FOLDER` a test that fails leaves a picture of each page there.
 */
export function useVisitors(): Visitors {
  let browser: Browser
  const known = new Map<string, SignedIn>()
  const open: Visitor[] = []
  beforeAll(async () => {
    browser = await launch()
  })
  afterEach(async ({ task }) => {
    const pictures = process.env.E2E_PICTURES
    if (pictures && task.result?.state === 'fail') {
      for (const [place, { page }] of open.entries()) await page.screenshot({ path: join(pictures, `${task.name.slice(0, 60).replace(/\W+/g, '-')}-${place}.png`) })
    }
    const faults = open.flatMap((visitor) => visitor.faults)
    for (const visitor of open.splice(0)) await visitor.close()
    expect(faults).toEqual([])
  })
  afterAll(() => browser.close())
  async function opened(options?: Parameters<typeof visit>[1]): Promise<Visitor> {
    const visitor = await visit(browser, options)
    open.push(visitor)
    return visitor
  }
  return {
    visit: opened,
    async visitAs(role, options) {
      const as = known.get(role) ?? await signedInAs(browser, role)
      known.set(role, as)
      return opened({ ...options, as })
    },
  }
}
