import { setTimeout as sleep } from 'node:timers/promises'
import { serverEntry } from './build.mjs'
import { address } from './net.mjs'
import { root } from './paths.mjs'
import { Stop, start } from './process.mjs'

const UP_MS = 60_000

/** Loopback's counterpart of an address that means "all of this machine's". */
const own = host => ({ '0.0.0.0': '127.0.0.1', '::': '::1' })[host] ?? host

/**
 * Starts the built server and waits until it says that it is healthy.
 * @param {{ env: Record<string, string>, host: string, port: number, stdio?: import('node:child_process').StdioOptions }} options
 * @returns {Promise<{ child: import('node:child_process').ChildProcess, url: string }>}
 */
export async function serve({ env, host, port, stdio = ['ignore', 'inherit', 'inherit'] }) {
  const child = start(process.execPath, ['--enable-source-maps', serverEntry], { cwd: root, env, stdio })
  let dead = false
  void child.ended.then(() => {
    dead = true
  })
  const url = address(own(host), port)
  const until = Date.now() + UP_MS
  let last = 'it did not answer'
  while (Date.now() < until) {
    if (dead) throw new Stop('The server ended before it was ready; its own words are above.')
    const status = await health(url)
    if (status === 200) return { child, url }
    if (status !== null) last = `GET /healthz answers ${status}`
    await sleep(60)
  }
  throw new Stop(`The server is not ready after ${UP_MS / 1000} s: ${last}.`)
}

async function health(url) {
  try {
    const answer = await fetch(`${url}/healthz`, { signal: AbortSignal.timeout(3000) })
    await answer.arrayBuffer()
    return answer.status
  }
  catch {
    return null
  }
}
