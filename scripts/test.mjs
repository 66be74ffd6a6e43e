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

/** `npm test -- unit|server|e2e [filter]` runs one suite, or the files of it whose path holds the filter. */
function readArguments([suite, ...filters]) {
  if (suite === undefined) return { suites: Object.keys(CONFIGS), checks: true, filters: [] }
  if (!(suite in CONFIGS)) throw new Stop(`There is no suite "${suite}"; there are ${Object.keys(CONFIGS).join(', ')}.`)
  return { suites: [suite], checks: false, filters }
}

async function vitest(suite, folder, env, filters) {
  say(`\nRunning the ${suite} tests …`)
  const report = join(folder, `report-${suite}.json`)
  const { code } = await run(process.execPath, [
    join(root, 'node_modules', 'vitest', 'vitest.mjs'), 'run', '--config', CONFIGS[suite],
    '--reporter=default', '--reporter=json', `--outputFile.json=${report}`, ...filters,
  ], { cwd: root, env })
  return sumReport(suite, report, code)
}

async function check(name, work) {
  say(`Checking: ${name} …`)
  const { passed, output } = await work
  return checkSum(name, passed, output)
}

/** One suite against a server of its own; whatever keeps it from running is a failure of that suite. */
async function againstServer(suite, { folder, shop, env, filters }) {
  let server
  try {
    const browser = suite === 'e2e' ? { CHROMIUM_PATH: await ensureChromium() } : {}
    server = await openTestServer(await shop, suite)
    const sum = await vitest(suite, folder, { ...env, ...server.env, ...browser }, filters)
    if (sum.failed > 0) say(['', `The end of the ${suite} server's log:`, ...tail(readFileSync(server.log, 'utf8'), 30)].join('\n'))
    return sum
  }
  catch (error) {
    if (isEnding()) throw error
    const log = error.log ? tail(readFileSync(error.log, 'utf8'), 30) : []
    return failedSum(suite, [error instanceof Stop ? error.message : error.stack, ...log].join('\n'))
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
    const shop = ensureBuild(env).then(() => openTestShop(folder, env, served))
    // Every suite meets the same failure where it waits for the shop; until then it is not unhandled.
    shop.catch(() => {})
    for (const suite of served) sums.push(await againstServer(suite, { folder, shop, env, filters }))
  }
  const { lines, code } = conclude(sums)
  say(lines.join('\n'))
  return code
}, { interrupted: 130 })
