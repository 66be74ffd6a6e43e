/** The page's own first load goes before everything that may be needed later. */
const AFTER_LOAD_MS = 3000

/**
 * Fetches parts that are not needed yet once the page stands and has nothing to do, so that they are there when they are
 * opened, also when the network is gone by then. A fetch that fails is tried again at the opening.
 */
export function fetchWhenIdle(fetch: () => Promise<unknown>): void {
  const go = (): void => { fetch().catch(() => undefined) }
  const idle = (): void => { if ('requestIdleCallback' in window) window.requestIdleCallback(go, { timeout: AFTER_LOAD_MS }); else go() }
  const wait = (): void => { setTimeout(idle, AFTER_LOAD_MS) }
  if (document.readyState === 'complete') wait()
  else window.addEventListener('load', wait, { once: true })
}
