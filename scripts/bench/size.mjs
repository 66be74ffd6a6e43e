import { mkdirSync, readFileSync, writeFileSync } from 'node:fs'
import { join } from 'node:path'
import { setTimeout as sleep } from 'node:timers/promises'
import { brotliCompressSync, constants } from 'node:zlib'
import { buildEnvironment } from '../lib/environment.mjs'
import { address, freePort } from '../lib/net.mjs'
import { root } from '../lib/paths.mjs'
import { Stop, endTree, must, start } from '../lib/process.mjs'
import { openPage, withChromium } from './chromium.mjs'
import { signIn } from './http.mjs'
import { serveProduct } from './place.mjs'

/** After this long without a request a page has what it needs. */
const QUIET_MS = 1000

/** What is fetched once the page has nothing to do is not its first load; on a slow machine it would begin before all else has come. */
const neverIdle = () => { window.requestIdleCallback = () => 0 }

/** The same Nuxt with the same modules and one page with nothing on it. */
const EMPTY = {
  'nuxt.config.ts': `export default defineNuxtConfig({
  modules: ['@nuxtjs/tailwindcss', '@pinia/nuxt', '@vueuse/nuxt', 'nuxt-auth-utils', 'nuxt-security'],
  srcDir: '.', telemetry: false, compatibilityDate: '2026-11-01', devtools: { enabled: false },
})
`,
  'app.vue': '<template><NuxtPage /></template>\n',
  'pages/index.vue': '<template><main>Empty</main></template>\n',
}

async function buildEmpty(place) {
  const folder = join(place.folder, 'empty')
  mkdirSync(join(folder, 'pages'), { recursive: true })
  for (const [name, text] of Object.entries(EMPTY)) writeFileSync(join(folder, name), text)
  await must('The empty page could not be built:', process.execPath, [join(root, 'node_modules', 'nuxt', 'bin', 'nuxt.mjs'), 'build', folder], {
    cwd: folder, env: buildEnvironment(place.env), capture: true,
  })
  return join(folder, '.output')
}

async function serveEmpty(place, output) {
  const port = await freePort()
  const child = start(process.execPath, [join(output, 'server', 'index.mjs')], {
    env: { ...place.env, NODE_ENV: 'production', HOST: '127.0.0.1', PORT: String(port), NUXT_SESSION_PASSWORD: place.shop.secrets.sessionSecret },
    stdio: ['ignore', 'ignore', 'inherit'],
  })
  const url = address('127.0.0.1', port)
  for (let tries = 0; tries < 200; tries++) {
    if ((await fetch(url).catch(() => null))?.ok) return { url, close: () => endTree(child.pid, 1200) }
    await sleep(50)
  }
  throw new Stop('The empty page does not answer.')
}

function brotli(file) {
  return brotliCompressSync(readFileSync(file), { params: { [constants.BROTLI_PARAM_QUALITY]: constants.BROTLI_MAX_QUALITY } }).length
}

/**
 * The scripts that a page asks for until it stands, packed; hints for later pages do not count.
 * @returns {Promise<{ total: number, files: { path: string, bytes: number }[] }>}
 */
async function firstLoad(browser, { url, path, cookie = '', output, until }) {
  const { context, page } = await openPage(browser, url, cookie, { width: 1280, height: 800 })
  await page.addInitScript(neverIdle)
  const scripts = new Set()
  let lastAt = Date.now()
  page.on('request', (request) => {
    if (request.resourceType() !== 'script') return
    scripts.add(new URL(request.url()).pathname)
    lastAt = Date.now()
  })
  await page.goto(url + path)
  await page.locator(until).first().waitFor()
  while (Date.now() - lastAt < QUIET_MS) await sleep(50)
  await context.close()
  const files = [...scripts].map(file => ({ path: file, bytes: brotli(join(output, 'public', file)) }))
  return { total: files.reduce((sum, { bytes }) => sum + bytes, 0), files: files.sort((a, b) => b.bytes - a.bytes) }
}

const kilobytes = bytes => `${(bytes / 1000).toFixed(1)} kB`

/**
 * The scripts of three first loads against an empty page's.
 * @param {import('./place.mjs').Place} place
 * @returns {Promise<import('./report.mjs').Row[]>}
 */
export async function measureSize(place) {
  const emptyOutput = await buildEmpty(place)
  const empty = await serveEmpty(place, emptyOutput)
  const product = await serveProduct(place, 'bench')
  const url = product.env.BASE_URL
  const output = join(root, '.output')
  const { cookie } = await signIn(url, 'sprayer')
  const answer = await fetch(`${url}/api/booths`, { headers: { cookie } })
  const { items: [booth] } = await answer.json()
  const pages = [
    { name: '`/bench`', path: '/bench', most: 1.8, until: 'main button' },
    { name: '`/screen/[boothId]`', path: `/screen/${booth.id}`, most: 1.6, until: 'main' },
    { name: 'the office\'s list, `/batches`', path: '/batches', most: 1.6, until: 'table' },
  ]
  const rows = await withChromium(async (browser) => {
    const base = await firstLoad(browser, { url: empty.url, path: '/', output: emptyOutput, until: 'main' })
    const measured = [{ figure: 'an empty page of the same Nuxt with the same modules, scripts by brotli', target: 'measured', measured: kilobytes(base.total) }]
    for (const { name, path, most, until } of pages) {
      const { total, files } = await firstLoad(browser, { url, path, cookie, output, until })
      const largest = files.slice(0, 3).map(({ bytes }) => kilobytes(bytes)).join(', ')
      measured.push({
        figure: `first load of ${name}`, target: `≤ ${most} ×`, value: total / base.total, most,
        measured: `${(total / base.total).toFixed(2)} × (${kilobytes(total)} in ${files.length} files, the largest ${largest})`,
      })
    }
    return measured
  })
  await product.close()
  await empty.close()
  return rows
}
