import { randomUUID } from 'node:crypto'
import { demoPassword } from '#shared/utils/demo'

/** Address of the running server that the test command started. */
export const baseUrl = process.env.BASE_URL ?? 'http://127.0.0.1:3000'

export type DemoRole = 'sprayer' | 'foreman' | 'manager'

export interface Answer<T> {
  status: number
  headers: Headers
  body: T
}

interface Options {
  /** Overrides or adds headers; undefined removes one that is sent by default. */
  headers?: Record<string, string | undefined>
  /** Sent as it is instead of JSON. */
  raw?: string | Uint8Array<ArrayBuffer>
  key?: string
}

/** A browser of its own: keeps cookies, sends the origin that a browser of the shop would send. */
export class Client {
  private readonly cookies = new Map<string, string>()

  get<T = Record<string, unknown>>(path: string, options: Options = {}) {
    return this.send<T>('GET', path, undefined, options)
  }

  post<T = Record<string, unknown>>(path: string, body?: unknown, options: Options = {}) {
    return this.send<T>('POST', path, body, options)
  }

  put<T = Record<string, unknown>>(path: string, body?: unknown, options: Options = {}) {
    return this.send<T>('PUT', path, body, options)
  }

  patch<T = Record<string, unknown>>(path: string, body?: unknown, options: Options = {}) {
    return this.send<T>('PATCH', path, body, options)
  }

  delete<T = Record<string, unknown>>(path: string, options: Options = {}) {
    return this.send<T>('DELETE', path, undefined, options)
  }

  async send<T = Record<string, unknown>>(method: string, path: string, body: unknown, options: Options = {}): Promise<Answer<T>> {
    const headers = new Headers({ origin: baseUrl })
    if (method !== 'GET') headers.set('content-type', 'application/json')
    if (method === 'POST') headers.set('idempotency-key', options.key ?? randomUUID())
    if (this.cookies.size > 0) headers.set('cookie', this.cookieHeader())
    for (const [name, value] of Object.entries(options.headers ?? {})) {
      if (value === undefined) headers.delete(name)
      else headers.set(name, value)
    }
    const answer = await fetch(baseUrl + path, {
      method,
      headers,
      body: options.raw ?? (body === undefined ? undefined : JSON.stringify(body)),
      redirect: 'manual',
    })
    this.keep(answer.headers.getSetCookie())
    const text = await answer.text()
    const isJson = answer.headers.get('content-type')?.includes('json') ?? false
    return { status: answer.status, headers: answer.headers, body: (isJson && text ? JSON.parse(text) : text) as T }
  }

  cookieHeader(): string {
    return [...this.cookies].map(([name, value]) => `${name}=${value}`).join('; ')
  }

  /** Takes over the cookies of another client, as they are now. */
  copy(): Client {
    const other = new Client()
    for (const [name, value] of this.cookies) other.cookies.set(name, value)
    return other
  }

  dropCookie(name: string): void {
    this.cookies.delete(name)
  }

  private keep(lines: string[]): void {
    for (const line of lines) {
      const [pair = ''] = line.split(';')
      const at = pair.indexOf('=')
      const value = pair.slice(at + 1)
      const gone = value === '' || /max-age=0(;|$)/i.test(line) || /expires=thu, 01 jan 1970/i.test(line)
      if (gone) this.cookies.delete(pair.slice(0, at))
      else this.cookies.set(pair.slice(0, at), value)
    }
  }
}

/** A browser in which one of the demo's people has signed in. */
export async function signedIn(role: DemoRole): Promise<Client> {
  const client = new Client()
  const { status, body } = await client.post('/api/session', { email: `${role}@potbell.example`, password: demoPassword })
  if (status !== 201) throw new Error(`the demo's ${role} could not sign in: ${status} ${JSON.stringify(body)}`)
  return client
}

/** A browser that is only a booth's screen, or only a bench: enrolled by the manager, nobody signed in. */
export async function enrolled(kind: 'screen' | 'bench', boothId: string, scaleId: string | null = null): Promise<Client> {
  const client = await signedIn('manager')
  const { status } = await client.post('/api/devices', { kind, name: `test ${kind} ${randomUUID().slice(0, 8)}`, boothId, scaleId })
  if (status !== 201) throw new Error(`the ${kind} could not be enrolled: ${status}`)
  client.dropCookie('potbell_session')
  return client
}

/** Several sessions of one person that take turns, for more requests than one session may send in a second. */
class Crowd extends Client {
  private turn = 0

  constructor(private readonly members: readonly Client[]) {
    super()
  }

  override send<T = Record<string, unknown>>(method: string, path: string, body: unknown, options: Options = {}): Promise<Answer<T>> {
    return this.next().send<T>(method, path, body, options)
  }

  override copy(): Client {
    return this.next().copy()
  }

  private next(): Client {
    const member = this.members[this.turn++ % this.members.length]
    if (!member) throw new Error('a crowd has members')
    return member
  }
}

/** As `signedIn`, for a file that asks faster than one session may. */
export async function signedInOften(role: DemoRole): Promise<Client> {
  const sessions = 12
  const members: Client[] = []
  // One after the other: tries at one account that come at once count as guessing.
  while (members.length < sessions) members.push(await signedIn(role))
  return new Crowd(members)
}
