import type { Locator, Page } from 'playwright-core'

/** What is touched, with its size on the glass in whole px. */
export interface Target {
  name: string
  width: number
  height: number
}

/** Everything in view that takes a touch, as large as it is on the glass. */
export async function targetsOf(within: Page | Locator): Promise<Target[]> {
  return within.locator('button:visible, a[href]:visible, input:visible, select:visible').evaluateAll((found) => found.map((element) => {
    const { width, height } = element.getBoundingClientRect()
    return { name: element.getAttribute('aria-label') ?? element.textContent?.trim() ?? '', width: Math.round(width), height: Math.round(height) }
  }))
}

/** Those that a glove would miss: smaller than `least` px one way or the other. */
export const tooSmall = async (within: Page | Locator, least: number): Promise<Target[]> =>
  (await targetsOf(within)).filter(({ width, height }) => width < least || height < least)
