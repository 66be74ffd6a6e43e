import { createInterface } from 'node:readline/promises'
import { Writable } from 'node:stream'
import { parseArgs } from 'node:util'
import * as z from 'zod'
import { isZone } from '#shared/utils/zone'
import { databaseClock } from '../server/utils/clock'
import { newId } from '../server/utils/ids'
import { hashSecret } from '../server/utils/password'
import { toInstant } from '../server/utils/rows'
import { mutate } from '../server/utils/transactions'
import { command, Refused, withConnections, type Connections } from './connections'
import { eraseUnfinished, readDemoState } from './demo/state'
import { seedReference } from './reference'

const usage = `create-manager --email ADDRESS --name "FULL NAME" [--shop "NAME OF THE SHOP"] [--zone Europe/Dublin]
The password (12 characters or more) is read from POTBELL_MANAGER_PASSWORD, or else from the standard input.`

const Manager = z.object({
  email: z.string('--email is missing').trim().toLowerCase().max(254).pipe(z.email('--email is no e-mail address')),
  name: z.string('--name is missing').trim().min(1, '--name is empty').max(120, '--name is longer than 120 characters'),
  shop: z.string().trim().min(1, '--shop is empty').max(120, '--shop is longer than 120 characters'),
  zone: z.string().refine(isZone, '--zone is no time zone that this machine knows'),
  password: z.string().min(12, 'the password needs at least 12 characters').max(256, 'the password is longer than 256 characters'),
})
type Manager = z.infer<typeof Manager>

/** A password from a pipe, or typed unseen at a terminal. */
async function readPassword(): Promise<string> {
  const { POTBELL_MANAGER_PASSWORD: given } = process.env
  if (given) return given
  if (!process.stdin.isTTY) {
    const chunks: Buffer[] = []
    for await (const chunk of process.stdin) chunks.push(Buffer.from(chunk as Uint8Array))
    return Buffer.concat(chunks).toString('utf8').replace(/\r?\n$/, '')
  }
  process.stderr.write('Password, at least 12 characters (it is not shown): ')
  const unseen = new Writable({ write: (_chunk, _encoding, done) => done() })
  const terminal = createInterface({ input: process.stdin, output: unseen, terminal: true })
  try {
    return await terminal.question('')
  } finally {
    terminal.close()
    process.stderr.write('\n')
  }
}

function readOptions(): Record<string, string | undefined> {
  const text = { type: 'string' } as const
  try {
    return parseArgs({ options: { email: text, name: text, shop: text, zone: text } }).values
  } catch (error) {
    if (error instanceof TypeError) throw new Refused(`${error.message}\n\n${usage}`)
    throw error
  }
}

/** @throws Refused naming everything that is missing or wrong */
function check<T>(schema: z.ZodType<T>, value: unknown): T {
  const result = schema.safeParse(value)
  if (result.success) return result.data
  throw new Refused(`${result.error.issues.map(({ message }) => message).join('; ')}.\n\n${usage}`)
}

/** The password is asked for only when everything else is right. */
async function readManager(): Promise<Manager> {
  const { timeZone } = Intl.DateTimeFormat().resolvedOptions()
  const named = check(Manager.omit({ password: true }), { shop: 'Spray shop', zone: timeZone, ...readOptions() })
  return check(Manager, { ...named, password: await readPassword() })
}

/** First letters of the first and the last word. */
function initialsOf(name: string): string {
  const words = name.split(/\s+/)
  return [...new Set([words[0], words.at(-1)])].map((word) => (word ?? '').slice(0, 1).toUpperCase()).join('')
}

async function create({ admin, app }: Connections, manager: Manager): Promise<void> {
  if (await app('users').first('id')) throw new Refused('This shop has people in it already: a manager makes the others.')
  // A demo that was cut off before its people came must not be taken for this shop, and erased with it, later on.
  if ((await readDemoState(admin)) === 'unfinished') await eraseUnfinished(admin)
  await seedReference(admin)
  const passwordHash = await hashSecret(manager.password)
  const ctx = { db: app, clock: databaseClock, principal: { kind: 'system', user: null, device: null }, requestId: newId(), wake: () => undefined } as const
  await mutate(ctx, async (m) => {
    const born = { created_at: toInstant(m.now), updated_at: toInstant(m.now) }
    const id = newId()
    const shop = { name: manager.shop, zone: manager.zone }
    await m.trx('settings').insert({ name: 'shop', value: JSON.stringify(shop), ...born }).onConflict('name').ignore()
    await m.trx('users').insert({
      id, email: manager.email, name: manager.name, initials: initialsOf(manager.name), role: 'manager', password_hash: passwordHash, demo_password: false, ...born,
    })
    m.audit({ action: 'user.created', subject: `user:${id}`, facts: { role: 'manager', first: true } })
  })
  console.log(`${manager.email} can sign in now as manager of "${manager.shop}", time zone ${manager.zone}.`)
}

await command(async () => {
  const manager = await readManager()
  await withConnections((connections) => create(connections, manager))
})
