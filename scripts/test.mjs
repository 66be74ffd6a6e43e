import { readFileSync } from 'node:fs'
import { join } from 'node:path'
import { ensureBuild } from './lib/build.mjs'
import { lint, prepareTypes, typecheck } from './lib/checks.mjs'
import { ensureChromium } from './lib/chromium.mjs'
import { scrub } from './lib/environment.mjs'
import { ensureMariadb } from './lib/mariadb.mjs'
import { ensurePackages } from './lib/packages.mjs'
import { root } from './lib/paths.mjs'
import { Stop, isEnding, main, run, say, tail } from './lib/process.mjs'
import { checkSum, conclude, failedSum, sumReport } from './lib/report.mjs'
import { checkNode } from './lib/settings.mjs'
import { openTestFolder, openTestServer, openTestShop } from './lib/test-shop.mjs'

const CONFIGS = { unit: 'vitest.config.ts', server: 'vitest.server.config.ts', e2e: 'vitest.e2e.config.ts' }

/** The browser tests run beside each other, half of them in each of two shops. */
const LANES = [{ name: 'e2e-office', filters: ['tests/e2e/office/'] }, { name: 'e2e-floor', filters: ['tests/e2e/floor/'] }]

/** `npm test -- unit|server|e2e [filter]` runs one suite, or the files of it whose path holds the filter. */
function readArguments([suite, ...filters]) {
  if (suite === undefined) return { suites: Object.keys(CONFIGS), checks: true, filters: [] }
  if (!(suite in CONFIGS)) throw new Stop(`There is no suite "${suite}"; there are ${Object.keys(CONFIGS).join(', ')}.`)
  return { suites: [suite], checks: false, filters }
}

/** What of a suite runs beside what; files that were asked for run one after the other. */
const lanesOf = (suite, filters) => suite === 'e2e' && filters.length === 0 ? LANES : [{ name: suite, filters }]

async function vitest(suite, folder, env, filters, name = suite) {
  say(`\nRunning the ${name} tests …`)
  const report = join(folder, `report-${name}.json`)
  const { code } = await run(process.execPath, [
    join(root, 'node_modules', 'vitest', 'vitest.mjs'), 'run', '--config', CONFIGS[suite],
    '--reporter=default', '--reporter=json', `--outputFile.json=${report}`, ...filters,
  ], { cwd: root, env })
  return sumReport(name, report, code)
}

async function check(name, work) {
  say(`Checking: ${name} …`)
  const { passed, output } = await work
  return checkSum(name, passed, output)
}

/** One suite, or a lane of it, against a server of its own; whatever keeps it from running is a failure of that suite. */
async function againstServer(suite, { folder, shop, env, filters, name = suite }) {
  let server
  try {
    const browser = suite === 'e2e' ? { CHROMIUM_PATH: await ensureChromium() } : {}
    server = await openTestServer(await shop, name)
    const sum = await vitest(suite, folder, { ...env, ...server.env, ...browser }, filters, name)
    if (sum.failed > 0) say(['', `The end of the ${name} server's log:`, ...tail(readFileSync(server.log, 'utf8'), 30)].join('\n'))
    return sum
  }
  catch (error) {
    if (isEnding()) throw error
    const log = error.log ? tail(readFileSync(error.log, 'utf8'), 30) : []
    return failedSum(name, [error instanceof Stop ? error.message : error.stack, ...log].join('\n'))
  }
  finally {
    await server?.close()
  }
}

await main(async () => {
  checkNode()
  const { suites, checks, filters } = readArguments(process.argv.slice(2))
  const env = scrub(process.env)
  await ensurePackages(root, env)
  await ensureMariadb()
  const folder = await openTestFolder()
  await prepareTypes(env)
  const sums = []
  if (checks) {
    sums.push(await check('lint', lint(env)))
    sums.push(await check('types', typecheck(env)))
  }
  if (suites.includes('unit')) sums.push(await vitest('unit', folder, env, filters))
  const served = suites.filter(suite => suite !== 'unit')
  if (served.length > 0) {
    const shop = ensureBuild(env).then(() => openTestShop(folder, env, served.flatMap(suite => lanesOf(suite, filters).map(({ name }) => name))))
    // Every suite meets the same failure where it waits for the shop; until then it is not unhandled.
    shop.catch(() => {})
    for (const suite of served) sums.push(...await Promise.all(lanesOf(suite, filters).map(lane => againstServer(suite, { folder, shop, env, ...lane }))))
  }
  const { lines, code } = conclude(sums)
  say(lines.join('\n'))
  return code
}, { interrupted: 130 })
