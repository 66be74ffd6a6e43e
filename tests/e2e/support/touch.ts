import type { Page } from 'playwright-core'

/** Something to touch that is too low for a glove: its words and the height that answers to a touch, in px. */
interface LowTarget { words: string; height: number }

/**
 * What on the page's bar and work answers to a touch over fewer than so many px from top to bottom. It is tried where
 * a finger would come down, through the middle of each: what lies over it, clips it or widens it counts.
 */
export const lowTargets = (page: Page, leastPx = 64): Promise<LowTarget[]> => page.evaluate((least) => {
  const kinds = ['button', 'select', 'a[href]', 'label:has(input)', 'input:not([type=radio], [type=checkbox])']
  const targets = [...document.querySelectorAll<HTMLElement>(kinds.map((kind) => `main ${kind}, header ${kind}`).join(', '))]
  return targets.filter((target) => target.checkVisibility({ visibilityProperty: true }) && !target.closest('.sr-only')).flatMap((target) => {
    target.scrollIntoView({ block: 'center' })
    const { left, width, top, bottom } = target.getBoundingClientRect()
    const answers = (y: number): boolean => {
      const hit = document.elementFromPoint(left + width / 2, y)
      return hit !== null && target.contains(hit)
    }
    let height = 0
    for (let y = Math.floor(top) - least; y < bottom + least; y++) if (answers(y + 0.5)) height++
    const words = (target.getAttribute('aria-label') ?? target.textContent ?? '').trim().replace(/\s+/g, ' ').slice(0, 40) || target.id
    return height < least ? [{ words, height }] : []
  })
}, leastPx)
