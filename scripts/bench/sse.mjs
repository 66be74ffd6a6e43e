import { Agent, request } from 'node:http'
import { join } from 'node:path'
import { setTimeout as sleep } from 'node:timers/promises'
import { pathToFileURL } from 'node:url'
import { root } from '../lib/paths.mjs'
import { Stop, say } from '../lib/process.mjs'
import { figure, percentile } from './arithmetic.mjs'
import { enrolScreen, signIn } from './http.mjs'
import { serveProduct } from './place.mjs'

const SCREENS = 200
const PATIENCE_MS = 10_000
const AT_ONCE = 50

/** Every stream has a socket of its own, as every screen on a wall has. */
const streams = new Agent({ keepAlive: false, maxSockets: Infinity })

/** Opens a stream as a screen does; `hear` gets each event's text, the promise settles with the first bytes. */
function listen(url, cookie, hear = () => {}) {
  return new Promise((done, fail) => {
    const asking = request(`${url}/api/events`, { agent: streams, headers: { cookie, accept: 'text/event-stream' } }, (answer) => {
      if (answer.statusCode !== 200) return fail(new Stop(`A stream was answered ${answer.statusCode}`))
      let rest = ''
      answer.setEncoding('utf8')
      answer.on('data', (text) => {
        rest += text
        const parts = rest.split('\n\n')
        rest = parts.pop()
        for (const part of parts) hear(part)
        done({ close: () => asking.destroy() })
      })
      // A stream that is cut from this side ends with an error that is what was asked for.
      answer.on('error', () => {})
    })
    asking.on('error', fail)
    asking.end()
  })
}

async function enrol(url) {
  const manager = await signIn(url, 'manager')
  const { items: booths } = await manager.get('/api/booths')
  const cookies = []
  while (cookies.length < SCREENS) {
    const screen = await enrolScreen(manager, booths[cookies.length % booths.length].id, `bench wall ${cookies.length + 1}`)
    cookies.push(screen.deviceCookie)
  }
  return cookies
}

/** Milliseconds from the request that makes an event to each screen that hears it. */
async function timeEvents(url, cookies, events) {
  const sprayer = await signIn(url, 'sprayer')
  const delays = []
  let heard = null
  const opened = await Promise.all(cookies.map(cookie => listen(url, cookie, text => heard?.(text))))
  for (let count = 0; count < events; count++) {
    const name = `bench ${count} ${process.pid}`
    const began = performance.now()
    let missing = cookies.length
    const all = new Promise((done) => {
      heard = (text) => {
        if (!text.includes(name)) return
        delays.push(performance.now() - began)
        if (--missing === 0) done()
      }
    })
    await sprayer.send('POST', '/api/timers', { name, minutes: 600 })
    const late = sleep(PATIENCE_MS, 'late')
    if (await Promise.race([all, late]) === 'late') throw new Stop(`${missing} of ${cookies.length} screens did not hear an event within ${PATIENCE_MS / 1000} s`)
    await sleep(50)
  }
  for (const stream of opened) stream.close()
  return delays
}

/** What the server's process holds after its rubbish was collected. */
function askMemory(socketPath) {
  return new Promise((done, fail) => {
    request({ socketPath, path: '/' }, (answer) => {
      let text = ''
      answer.setEncoding('utf8').on('data', (part) => { text += part }).on('end', () => done(JSON.parse(text)))
    }).on('error', fail).end()
  })
}

async function connectOften(url, cookies, times) {
  let next = 0
  const one = async () => {
    while (next < times) {
      const stream = await listen(url, cookies[next++ % cookies.length])
      stream.close()
    }
  }
  await Promise.all(Array.from({ length: AT_ONCE }, one))
  // The last ones are noticed as gone.
  await sleep(1000)
}

const megabytes = bytes => `${(bytes / 1e6).toFixed(1)} MB`

/**
 * Two hundred walls on the stream, and ten thousand that come and go.
 * @param {import('./place.mjs').Place} place
 * @returns {Promise<import('./report.mjs').Row[]>}
 */
export async function measureStream(place) {
  const probe = join(place.folder, 'p.sock')
  const server = await serveProduct(place, 'bench', {
    NODE_OPTIONS: `--import=${pathToFileURL(join(root, 'scripts', 'bench', 'memory-probe.mjs'))}`, BENCH_PROBE: probe,
  })
  const url = server.env.BASE_URL
  const cookies = await enrol(url)
  const events = place.quick ? 20 : 100
  say(`${events} events to ${SCREENS} screens …`)
  const delays = await timeEvents(url, cookies, events)
  const connects = place.quick ? 1000 : 10_000
  say(`${connects} connects …`)
  // The first tenth fills what is kept for good.
  await connectOften(url, cookies, connects / 10)
  const memory = [await askMemory(probe)]
  for (let half = 0; half < 2; half++) {
    await connectOften(url, cookies, connects / 2)
    memory.push(await askMemory(probe))
  }
  await server.close()
  const p99 = percentile(delays, 0.99)
  const growth = name => memory.at(-1)[name] / memory[0][name]
  const walk = name => memory.map(one => megabytes(one[name])).join(', ')
  return [
    {
      figure: `an event to all of ${SCREENS} screens, from the request that makes it, p99 of ${delays.length}`, target: '≤ 500 ms', value: p99, most: 500,
      measured: `${figure(p99)} ms (p50 ${figure(percentile(delays, 0.5))} ms, the longest ${figure(Math.max(...delays))} ms)`,
    },
    {
      figure: `heap over ${connects} connects, after collection`, target: '≤ 1.1 ×', value: growth('heapUsed'), most: 1.1,
      measured: `${growth('heapUsed').toFixed(3)} × (at the start, the middle and the end ${walk('heapUsed')})`,
    },
    {
      figure: `resident memory over ${connects} connects`, target: '≤ 1.1 ×', value: growth('rss'), most: 1.1,
      measured: `${growth('rss').toFixed(3)} × (${walk('rss')})`,
    },
  ]
}
