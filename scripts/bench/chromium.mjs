import { ensureChromium } from '../lib/chromium.mjs'
import { require } from './place.mjs'

const ARGS = [
  '--no-sandbox', '--disable-gpu', '--disable-dev-shm-usage', '--disable-quic', '--no-first-run', '--disable-background-networking',
  '--disable-component-update', '--disable-sync',
]

/** Opens Chromium, works, and closes it whatever happened. */
export async function withChromium(work) {
  const { chromium } = require('playwright-core')
  const browser = await chromium.launch({ executablePath: await ensureChromium(), args: ARGS })
  try {
    return await work(browser)
  }
  finally {
    await browser.close()
  }
}

/** A page in a browser of its own that carries a session's cookie. */
export async function openPage(browser, url, cookie, viewport) {
  const context = await browser.newContext({ viewport })
  const cookies = cookie.split('; ').filter(Boolean).map((pair) => {
    const at = pair.indexOf('=')
    return { name: pair.slice(0, at), value: pair.slice(at + 1), url }
  })
  await context.addCookies(cookies)
  return { context, page: await context.newPage() }
}
