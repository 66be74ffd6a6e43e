import { ensureBuild } from './lib/build.mjs'
import { scrub } from './lib/environment.mjs'
import { ensureMariadb } from './lib/mariadb.mjs'
import { ensurePackages } from './lib/packages.mjs'
import { root } from './lib/paths.mjs'
import { Stop, isEnding, main, say } from './lib/process.mjs'
import { checkNode } from './lib/settings.mjs'
import { openPlace } from './bench/place.mjs'
import { PARTS, tableRow, writeReport } from './bench/report.mjs'

/** `npm run bench -- [part …] [--quick]` measures all parts, or those that are named. */
function readArguments(args) {
  const quick = args.includes('--quick')
  const named = args.filter(arg => arg !== '--quick')
  const stranger = named.find(name => !(name in PARTS))
  if (stranger !== undefined) throw new Stop(`There is no part "${stranger}"; there are ${Object.keys(PARTS).join(', ')}.`)
  return { quick, parts: named.length > 0 ? named : Object.keys(PARTS) }
}

/** The parts are loaded once the packages are there. */
const LOADERS = {
  list: async () => (await import('./bench/list.mjs')).measureList,
  post: async () => (await import('./bench/post.mjs')).measurePost,
  engine: async () => (await import('./bench/engine.mjs')).measureEngine,
  screen: async () => (await import('./bench/screen.mjs')).measureScreen,
  size: async () => (await import('./bench/size.mjs')).measureSize,
  sse: async () => (await import('./bench/sse.mjs')).measureStream,
}

/** Measures one part and writes it down; one that fails is told and leaves the report and the other parts alone. */
async function measure(part, place) {
  try {
    const work = await LOADERS[part]()
    const rows = await work(place)
    for (const row of rows) say(tableRow(row))
    writeReport({ [part]: rows }, { quick: place.quick })
    return true
  }
  catch (error) {
    if (isEnding()) throw error
    say(error instanceof Stop ? error.message : error.stack)
    return false
  }
}

await main(async () => {
  checkNode()
  const { quick, parts } = readArguments(process.argv.slice(2))
  const env = scrub(process.env)
  await ensurePackages(root, env)
  await ensureMariadb()
  await ensureBuild(env)
  const place = await openPlace(env, { quick })
  const failed = []
  for (const part of parts) {
    say(`\n${PARTS[part]} …`)
    if (!await measure(part, place)) failed.push(part)
  }
  say(`\nThe report is docs/bench-report.md.${failed.length > 0 ? ` Not measured: ${failed.join(', ')}.` : ''}`)
  return failed.length === 0 ? 0 : 1
}, { interrupted: 130 })
