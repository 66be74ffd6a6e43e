import { say } from '../lib/process.mjs'
import { mustRunFile } from '../lib/typescript.mjs'
import { figure, median, medianRatio } from './arithmetic.mjs'
import { serveBare } from './bare.mjs'
import { fillBatches, settleDatabase } from './fill.mjs'
import { signInOften } from './http.mjs'
import { latency, requestsPerSecond } from './load.mjs'
import { serveProduct } from './place.mjs'

const CONNECTIONS = 20
/** One for each connection and some more, so that none comes near its hundred requests a second. */
const SESSIONS = 24
const PAGE_WORDS = { first: 'first page', deep: 'filtered page in the middle of the log' }

async function openSize(place, suite, schema, count) {
  await fillBatches(place, schema, count)
  return { suite, count }
}

async function serveSize(place, { suite, count }) {
  const env = place.shop.environment({ 'bench': 'potbell_bench', 'bench-large': 'potbell_bench_large' }[suite])
  const pages = JSON.parse((await mustRunFile('The pages could not be read:', 'scripts/bench/queries.ts', env, { capture: true })).trimEnd().split('\n').at(-1))
  const product = await serveProduct(place, suite)
  const bare = await serveBare(place, env.DATABASE_URL, pages)
  const cookies = (await signInOften(product.env.BASE_URL, 'foreman', SESSIONS)).map(({ cookie }) => cookie)
  return { count, pages, product, bare, cookies, close: () => Promise.all([product.close(), bare.close()]) }
}

const addressesOf = ({ product, bare }, { name, path }) => ({ ours: product.env.BASE_URL + path, theirs: `${bare.url}/rows?page=${name}` })

/** Rounds of the one and the other in turn. */
async function compare(size, page, { rounds, seconds }) {
  const { ours, theirs } = addressesOf(size, page)
  const pairs = []
  for (let round = 0; round <= rounds; round++) {
    const one = await requestsPerSecond(ours, { seconds, connections: CONNECTIONS, cookies: size.cookies })
    const other = await requestsPerSecond(theirs, { seconds, connections: CONNECTIONS })
    // The first round warms both.
    if (round > 0) pairs.push([one, other])
  }
  return pairs
}

async function compareSizes(small, large, page, { rounds, requests }) {
  const pairs = []
  for (let round = 0; round <= rounds; round++) {
    const times = []
    for (const size of [large, small]) {
      const { path } = size.pages.find(({ name }) => name === page)
      times.push(await latency(size.product.env.BASE_URL + path, { requests, cookies: size.cookies }))
    }
    if (round > 0) pairs.push(times)
  }
  return pairs
}

const thousands = count => count >= 1e6 ? `${count / 1e6} M` : `${count / 1e3} k`

/**
 * The log against a bare route with the same SELECT, and against itself a hundred times as long.
 * @param {import('./place.mjs').Place} place
 * @returns {Promise<import('./report.mjs').Row[]>}
 */
export async function measureList(place) {
  const { quick } = place
  const effort = quick ? { rounds: 3, seconds: 2, requests: 60 } : { rounds: 5, seconds: 5, requests: 300 }
  const sizes = [
    await openSize(place, 'bench', 'potbell_bench', 10_000),
    await openSize(place, 'bench-large', 'potbell_bench_large', quick ? 100_000 : 1_000_000),
  ]
  await settleDatabase(place)
  const [small, large] = [await serveSize(place, sizes[0]), await serveSize(place, sizes[1])]
  const rows = []
  for (const size of [small, large]) {
    for (const page of size.pages) {
      say(`The ${PAGE_WORDS[page.name]} of ${thousands(size.count)} batches …`)
      const pairs = await compare(size, page, effort)
      const value = medianRatio(pairs)
      rows.push({
        figure: `\`GET /api/batches\`, ${PAGE_WORDS[page.name]}, ${thousands(size.count)} batches, against a bare Nitro route with the same SELECT`,
        target: '≥ 0.7 × its requests a second', least: 0.7, value,
        measured: `${figure(value)} × (${figure(median(pairs.map(([one]) => one)))} to ${figure(median(pairs.map(([, other]) => other)))} requests/s)`,
      })
    }
  }
  for (const name of Object.keys(PAGE_WORDS)) {
    const pairs = await compareSizes(small, large, name, effort)
    const value = medianRatio(pairs)
    rows.push({
      figure: `${PAGE_WORDS[name]}: ${thousands(large.count)} against ${thousands(small.count)} batches`,
      target: '≤ 1.5 × the time', most: 1.5, value,
      measured: `${figure(value)} × (${figure(median(pairs.map(([one]) => one)))} to ${figure(median(pairs.map(([, other]) => other)))} ms)`,
    })
  }
  await small.close()
  await large.close()
  return rows
}
