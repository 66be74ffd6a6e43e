import type { Locator, Page } from 'playwright-core'

/** How a person works a page: with a pointer or finger, or by keyboard alone. */
export interface Hand {
  press: (target: Locator) => Promise<void>
  fill: (target: Locator, text: string) => Promise<void>
  choose: (target: Locator, label: string) => Promise<void>
}

export const pointer: Hand = {
  press: (target) => target.click(),
  fill: (target, text) => target.fill(text),
  choose: async (target, label) => void await target.selectOption({ label }),
}

/** More stops than any page has: whoever does not arrive by then never will. */
const MOST_STOPS = 250

const isFocused = (target: Locator): Promise<boolean> => target.evaluate((element) => element === document.activeElement)

/** Goes to the target by Tab, as somebody without a pointer has to. It must be seen to have the focus. */
async function tabTo(page: Page, target: Locator): Promise<void> {
  await target.waitFor()
  for (let stops = 0; stops < MOST_STOPS; stops++) {
    if (await isFocused(target)) return
    await page.keyboard.press('Tab')
  }
  throw new Error(`Tab never comes to ${target.toString()}`)
}

/** A hand that touches nothing but keys. Buttons that sleep are waited for, as a person would. */
export function keyboardOf(page: Page): Hand {
  return {
    async press(target) {
      await target.and(page.locator(':not(:disabled)')).waitFor()
      await tabTo(page, target)
      await page.keyboard.press('Enter')
    },
    async fill(target, text) {
      await tabTo(page, target)
      await page.keyboard.press('Control+A')
      await page.keyboard.type(text)
    },
    async choose(target, label) {
      await tabTo(page, target)
      const chosen = () => target.evaluate((element) => (element as HTMLSelectElement).selectedOptions[0]?.label.trim() ?? '')
      await page.keyboard.press('Home')
      for (let options = 0; options < MOST_STOPS; options++) {
        if (await chosen() === label) return
        await page.keyboard.press('ArrowDown')
      }
      throw new Error(`The arrow keys never come to "${label}"`)
    },
  }
}
