import type { Page } from 'playwright-core'

interface Heard { strokes: number[] }

/** Notes when the bell strikes, from before the page's first script on. */
export const listenForBell = (page: Page): Promise<unknown> => page.context().addInitScript(() => {
  const heard = window as unknown as Heard
  heard.strokes = []
  const strike = OscillatorNode.prototype.start
  OscillatorNode.prototype.start = function (...times) {
    heard.strokes.push(Date.now())
    strike.apply(this, times)
  }
})

/** When the bell struck since the page was opened: epoch milliseconds by the browser's clock, the first first. */
export const strokesOf = (page: Page): Promise<number[]> => page.evaluate(() => (window as unknown as Heard).strokes)

/** Waits until the bell has struck more often than `before`. */
export async function strikesAgain(page: Page, before: number): Promise<void> {
  await page.waitForFunction((seen) => (window as unknown as Heard).strokes.length > seen, before)
}
