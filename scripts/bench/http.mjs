import { randomUUID } from 'node:crypto'
import { Stop } from '../lib/process.mjs'

const PASSWORD = 'let the pot ring'

/** One browser: it keeps its cookies and sends the origin of the shop. */
class Visitor {
  #cookies = new Map()

  constructor(url) {
    this.url = url
  }

  get cookie() {
    return [...this.#cookies].map(([name, value]) => `${name}=${value}`).join('; ')
  }

  drop(name) {
    this.#cookies.delete(name)
  }

  /** Sends JSON and answers what came; anything but a 2xx is the end of the bench. */
  async send(method, path, body, key = randomUUID()) {
    const headers = { origin: this.url, cookie: this.cookie }
    if (body !== undefined) headers['content-type'] = 'application/json'
    if (method === 'POST') headers['idempotency-key'] = key
    const answer = await fetch(this.url + path, { method, headers, body: body === undefined ? undefined : JSON.stringify(body) })
    for (const line of answer.headers.getSetCookie()) {
      const [pair] = line.split(';')
      const at = pair.indexOf('=')
      this.#cookies.set(pair.slice(0, at), pair.slice(at + 1))
    }
    const text = await answer.text()
    if (!answer.ok) throw new Stop(`${method} ${path} answered ${answer.status}: ${text.slice(0, 300)}`)
    return text === '' ? null : JSON.parse(text)
  }

  get(path) {
    return this.send('GET', path)
  }
}

/** A browser in which one of the demo's people has signed in. */
export async function signIn(url, role) {
  const visitor = new Visitor(url)
  await visitor.send('POST', '/api/session', { email: `${role}@potbell.example`, password: PASSWORD })
  return visitor
}

/** So many sessions, opened one after the other: one alone may send a hundred requests a second. */
export async function signInOften(url, role, count) {
  const visitors = []
  while (visitors.length < count) visitors.push(await signIn(url, role))
  return visitors
}

/** A browser that is only a booth's screen. */
export async function enrolScreen(manager, boothId, name) {
  const screen = new Visitor(manager.url)
  const answer = await fetch(`${manager.url}/api/devices`, {
    method: 'POST',
    headers: { 'origin': manager.url, 'cookie': manager.cookie, 'content-type': 'application/json', 'idempotency-key': randomUUID() },
    body: JSON.stringify({ kind: 'screen', name, boothId, scaleId: null }),
  })
  if (answer.status !== 201) throw new Stop(`A screen could not be enrolled: ${answer.status} ${await answer.text()}`)
  const [pair] = (answer.headers.getSetCookie().find(line => line.includes('device')) ?? '').split(';')
  screen.deviceCookie = pair
  return screen
}
