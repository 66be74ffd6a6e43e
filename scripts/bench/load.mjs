import { Agent, request } from 'node:http'
import { Stop } from '../lib/process.mjs'
import { median } from './arithmetic.mjs'
import { require } from './place.mjs'

/**
 * Requests a second that an address answers to so many who ask at once.
 * @param {string} url
 * @param {{ seconds: number, connections: number, cookies?: string[] }} options each connection has a session of its own
 * @returns {Promise<number>}
 */
export async function requestsPerSecond(url, { seconds, connections, cookies = [] }) {
  const autocannon = require('autocannon')
  let next = 0
  const result = await autocannon({
    url, connections, duration: seconds,
    setupClient: client => client.setHeaders(cookies.length > 0 ? { cookie: cookies[next++ % cookies.length] } : {}),
  })
  if (result.non2xx > 0 || result.errors > 0) {
    throw new Stop(`${url}: ${result.errors} errors under load, answers ${JSON.stringify(result.statusCodeStats)}`)
  }
  return result.requests.total / result.duration
}

const agent = new Agent({ keepAlive: true, maxSockets: 1 })

function timed(url, cookie) {
  return new Promise((done, fail) => {
    const began = performance.now()
    const asking = request(url, { agent, headers: cookie ? { cookie } : {} }, (answer) => {
      answer.on('data', () => {})
      answer.on('end', () => answer.statusCode === 200 ? done(performance.now() - began) : fail(new Stop(`${url} answered ${answer.statusCode}`)))
    })
    asking.on('error', fail)
    asking.end()
  })
}

/**
 * Milliseconds until an address has answered, one request after the other; sessions take turns.
 * @returns {Promise<number>} the median
 */
export async function latency(url, { requests, cookies = [] }) {
  const times = []
  for (let count = 0; count < requests; count++) times.push(await timed(url, cookies[count % cookies.length]))
  return median(times)
}
