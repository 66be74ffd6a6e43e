import type { Page } from 'playwright-core'

/** One stroke of the bell: when, by the browser's clock in epoch milliseconds, and whether it was one of the soft ones. */
interface Stroke { at: number; soft: boolean }
interface Heard { strokes: Stroke[] }

/** Notes when the bell strikes, from before the page's first script on. The partials of one stroke start together and count once. */
export const listenForBell = (page: Page): Promise<unknown> => page.context().addInitScript(() => {
  const heard = window as unknown as Heard
  heard.strokes = []
  const strike = OscillatorNode.prototype.start
  OscillatorNode.prototype.start = function (...times) {
    // The lowest partial is an octave below the strike note: 330 Hz of the ringing bell, 220 Hz of the soft one.
    if (this.frequency.value < 340) heard.strokes.push({ at: Date.now(), soft: this.frequency.value < 300 })
    strike.apply(this, times)
  }
})

const heardOn = (page: Page): Promise<Stroke[]> => page.evaluate(() => (window as unknown as Heard).strokes)

/** When the bell struck since the page was opened, soft strokes too, the first first. */
export const strokesOf = async (page: Page): Promise<number[]> => (await heardOn(page)).map(({ at }) => at)

/** When it struck aloud: because a pot's life is up. */
export const ringsOf = async (page: Page): Promise<number[]> => (await heardOn(page)).filter(({ soft }) => !soft).map(({ at }) => at)

/** Waits until the bell has struck more often than `before`. */
export async function strikesAgain(page: Page, before: number): Promise<void> {
  await page.waitForFunction((seen) => (window as unknown as Heard).strokes.length > seen, before)
}

/** Waits until it has struck aloud more often than `before`. */
export async function ringsAgain(page: Page, before: number): Promise<void> {
  await page.waitForFunction((seen) => (window as unknown as Heard).strokes.filter(({ soft }) => !soft).length > seen, before)
}
