import { setTimeout as sleep } from 'node:timers/promises'
import { Stop } from '../lib/process.mjs'
import { figure, percentile } from './arithmetic.mjs'
import { openPage, withChromium } from './chromium.mjs'
import { signIn } from './http.mjs'
import { serveProduct } from './place.mjs'

/** One refresh of a screen of 60 Hz. */
const FRAME_MS = 1000 / 60
const SLOWED = 4
/** Digits of an area: each changes the grams of every component. */
const KEYS = ['5', '3', 'Backspace', '7', 'Backspace', 'Backspace']

/**
 * Times the main thread's work of each key press in the page: from the key to the end of what it set off, and from the
 * next frame's beginning to its end, when style, layout and paint are done. The wait for the screen in between is none of
 * ours. A message to oneself is delivered when the task at hand, or the frame, is over.
 */
function watchKeys() {
  const presses = []
  const channel = new MessageChannel()
  const waiting = []
  channel.port1.onmessage = () => waiting.shift()()
  const whenOver = (then) => {
    waiting.push(then)
    channel.port2.postMessage(0)
  }
  const text = () => document.querySelector('main').textContent
  const time = (mine, then = () => {}) => {
    const began = performance.now()
    whenOver(() => {
      mine.spans.push([began, performance.now()])
      then()
    })
  }
  // Spans may overlap, as where the next task began before the message came: each moment counts once.
  const lengthOf = spans => spans.sort(([a], [b]) => a - b).reduce(({ sum, until }, [from, to]) =>
    ({ sum: sum + Math.max(0, to - Math.max(from, until)), until: Math.max(to, until) }), { sum: 0, until: 0 }).sum
  let press = null
  document.addEventListener('keydown', (event) => {
    const mine = { spans: [], pressedAt: event.timeStamp, before: text() }
    press = mine
    time(mine)
    requestAnimationFrame(() => time(mine, () => {
      presses.push({ work: lengthOf(mine.spans), total: performance.now() - mine.pressedAt, changed: text() !== mine.before })
    }))
  }, true)
  document.addEventListener('input', () => { if (press) time(press) }, true)
  window.benchPresses = presses
}

async function press(page, field, count) {
  await field.focus()
  await page.evaluate(() => { window.benchPresses.length = 0 })
  for (let key = 0; key < count; key++) {
    await page.keyboard.press(KEYS[key % KEYS.length])
    await page.waitForFunction(seen => window.benchPresses.length > seen, key)
    // A person's pace: what may be put off until after the picture is done between the keys.
    await sleep(60)
  }
  return page.evaluate(() => [...window.benchPresses])
}

async function openBench(browser, url) {
  const { cookie } = await signIn(url, 'sprayer')
  const { context, page } = await openPage(browser, url, cookie, { width: 1280, height: 800 })
  await page.goto(`${url}/bench`)
  await page.getByRole('region', { name: 'Today\'s list' }).getByRole('button', { name: /Ready/ }).first().click()
  const field = page.getByLabel('Panel area').and(page.getByRole('textbox'))
  await field.waitFor()
  await page.waitForLoadState('networkidle')
  await page.evaluate(watchKeys)
  return { context, page, field }
}

/**
 * A key press in the bench's area field on a slowed processor: how long the page works until cup and working stand anew.
 * @param {import('./place.mjs').Place} place
 * @returns {Promise<import('./report.mjs').Row[]>}
 */
export async function measureScreen(place) {
  const server = await serveProduct(place, 'bench')
  const presses = await withChromium(async (browser) => {
    const { context, page, field } = await openBench(browser, server.env.BASE_URL)
    await press(page, field, 30)
    const devtools = await context.newCDPSession(page)
    await devtools.send('Emulation.setCPUThrottlingRate', { rate: SLOWED })
    return press(page, field, place.quick ? 60 : 180)
  })
  await server.close()
  if (presses.filter(({ changed }) => changed).length < presses.length * 0.9) throw new Stop('The keys did not change the bench\'s figures.')
  const works = presses.map(({ work }) => work)
  const totals = presses.map(({ total }) => total)
  const [p50, p95] = [percentile(works, 0.5), percentile(works, 0.95)]
  const name = share => `${presses.length} key presses in the area field, processor ${SLOWED} × slowed: the page's work until cup and working are drawn, ${share}`
  return [
    { figure: name('p50'), target: '≤ 16.7 ms', value: p50, most: FRAME_MS, measured: `${figure(p50)} ms` },
    { figure: name('p95'), target: '≤ 16.7 ms', value: p95, most: FRAME_MS, measured: `${figure(p95)} ms` },
    {
      figure: 'the same with the wait for the screen\'s next refresh', target: 'measured',
      measured: `p50 ${figure(percentile(totals, 0.5))} ms, p95 ${figure(percentile(totals, 0.95))} ms`,
    },
  ]
}
