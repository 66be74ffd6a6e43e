import { execFile } from 'node:child_process'
import { randomUUID } from 'node:crypto'
import { fileURLToPath } from 'node:url'
import { promisify } from 'node:util'
import type { Knex } from 'knex'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { demoPassword, demoSignIns } from '#shared/utils/demo'
import { makeDemo, type MakeOutcome } from '../../seeds/demo/make'
import { eraseUnfinished, readDemoState } from '../../seeds/demo/state'
import { openToday } from '../../seeds/demo/today'
import { createKnex } from '../../server/database/connection'
import { findPots } from '../../server/repositories/pots'
import { readShop } from '../../server/repositories/settings'
import { readBench } from '../../server/services/bench'
import { latestClimate } from '../../server/services/climate'
import { windowsAt } from '../../server/services/windows'
import { verifyChain } from '../../server/utils/audit'
import { toldClock } from '../../server/utils/clock'
import type { Context } from '../../server/utils/context'
import { verifySecret } from '../../server/utils/password'
import { openSchema, type Schema } from './support/schema'

const minuteMs = 60_000
/** Three weeks hold every kind of thing that twelve hold; the shop of the whole suite has all twelve. */
const weeks = 3
const patience = 600_000

let schema: Schema
let made: Extract<MakeOutcome, { made: true }>
let now: number

const context = (): Context => ({
  db: schema.db, clock: toldClock(() => now), principal: { kind: 'system', user: null, device: null }, requestId: randomUUID(), wake: () => undefined,
})
const count = async (table: string, where: (query: Knex.QueryBuilder) => void = () => undefined): Promise<number> => {
  const query = schema.db(table)
  where(query)
  const row = await query.count<{ n: string }[]>({ n: '*' })
  return Number(row[0]?.n)
}
async function rows<T>(sql: string, bindings: readonly string[] = [], db: Knex = schema.db): Promise<T[]> {
  const [found] = await db.raw<[T[]]>(sql, [...bindings])
  if (!found) throw new Error('the database gave no answer')
  return found
}

beforeAll(async () => {
  schema = await openSchema(`seed_${randomUUID().slice(0, 8)}`)
  const connections = { admin: schema.admin, app: schema.db }
  const cutOff = () => {
    throw new Error('the power failed')
  }
  await expect(makeDemo(connections, { weeks: 1, say: cutOff })).rejects.toThrow('the power failed')
  expect(await readDemoState(schema.admin)).toBe('unfinished')
  expect(await count('batches')).toBeGreaterThan(10)
  const outcome = await makeDemo(connections, { weeks, say: () => undefined })
  if (!outcome.made) throw new Error('no demo was made')
  made = outcome
  const [clock] = await rows<{ now: Date }>('SELECT UTC_TIMESTAMP(3) AS now')
  now = clock?.now.getTime() ?? 0
}, patience)
afterAll(() => schema.drop())

describe('making the demo shop', () => {
  it('begins anew when it was cut off, and leaves a finished one alone', async () => {
    expect(made.rebuilt).toBe(true)
    expect(await readDemoState(schema.admin)).toBe('done')
    const before = await count('audit_entries')
    expect(await makeDemo({ admin: schema.admin, app: schema.db }, { weeks, say: () => undefined })).toEqual({ made: false, why: 'done' })
    expect(await count('audit_entries')).toBe(before)
    await expect(eraseUnfinished(schema.admin)).rejects.toThrow('only an unfinished demo')
  })

  it('leaves one whole chain with an entry for everything', async () => {
    const verdict = await verifyChain(schema.db)
    expect(verdict).toMatchObject({ ok: true, fault: null })
    expect(verdict.entries).toBe(await count('audit_entries'))
    expect(await count('audit_entries', (q) => void q.where('action', 'batch.sealed'))).toBe(await count('batches', (q) => void q.where('outcome', 'mixed')))
    expect(await count('batches')).toBe(made.report.batches)
  })

  it('lets all three sign in with the public password, and nobody else', async () => {
    const users = await schema.db('users').select<{ email: string, password_hash: string | null, demo_password: number }[]>('email', 'password_hash', 'demo_password')
    for (const { email } of demoSignIns) {
      const user = users.find((one) => one.email === email)
      expect(user?.demo_password).toBe(1)
      expect(await verifySecret(user?.password_hash ?? '', demoPassword)).toBe(true)
    }
    const others = users.filter(({ email }) => !demoSignIns.some((one) => one.email === email))
    expect(others.length).toBeGreaterThanOrEqual(3)
    expect(others.filter(({ password_hash: hash }) => hash !== null)).toEqual([])
  })

  it('has work on every working day', async () => {
    const days = await rows<{ day: string, n: string }>('SELECT DATE_FORMAT(mixed_at, \'%Y-%m-%d\') AS day, COUNT(*) AS n FROM batches GROUP BY day')
    expect(days.length).toBeGreaterThanOrEqual(weeks * 5 - 1)
    expect(days.length).toBeLessThanOrEqual(weeks * 5 + 1)
    expect(await count('batches', (q) => void q.where('mixed_at', '>', new Date(now)))).toBe(0)
    expect(await count('batches', (q) => void q.whereNull('job_step_id'))).toBeGreaterThan(2)
  })

  it('has jobs at every state, with sprayed coats behind them', async () => {
    const states = await rows<{ state: string, n: string }>('SELECT state, COUNT(*) AS n FROM jobs GROUP BY state')
    const of = Object.fromEntries(states.map(({ state, n }) => [state, Number(n)]))
    expect(of).toMatchObject({ held: 1, planned: expect.any(Number), running: expect.any(Number), done: expect.any(Number) })
    expect(await rows('SELECT j.code FROM jobs j JOIN job_steps s ON s.job_id = j.id WHERE j.state = \'done\' AND s.state <> \'done\'')).toEqual([])
    const uncoated = await rows(`SELECT j.code, p.label FROM jobs j JOIN pieces p ON p.job_id = j.id JOIN job_steps s ON s.job_id = j.id
      JOIN schedule_steps c ON c.id = s.schedule_step_id AND c.kind = 'coat' WHERE j.state = 'done' AND NOT EXISTS (
        SELECT 1 FROM applications a JOIN application_pieces ap ON ap.application_id = a.id
        WHERE a.job_step_id = s.id AND ap.piece_id = p.id AND a.coat_number = c.coats)`)
    expect(uncoated).toEqual([])
  })
})

describe('the shelves of the demo shop', () => {
  it('hold what was received less what was poured, and never less than nothing', async () => {
    expect(await rows('SELECT lot_id FROM lot_movements GROUP BY lot_id HAVING SUM(grams) < 0')).toEqual([])
    const drawn = await rows(`SELECT b.id FROM batches b
      JOIN (SELECT batch_id, SUM(grams) AS g FROM batch_pours GROUP BY batch_id) p ON p.batch_id = b.id
      LEFT JOIN (SELECT batch_id, -SUM(grams) AS g FROM lot_movements WHERE kind = 'poured' GROUP BY batch_id) m ON m.batch_id = b.id
      WHERE p.g <> b.poured_total_g OR m.g IS NULL OR m.g <> p.g`)
    expect(drawn).toEqual([])
    expect(await count('lots', (q) => void q.where('count_needed', true))).toBe(0)
    const kinds = await rows<{ kind: string }>('SELECT DISTINCT kind FROM lot_movements ORDER BY kind')
    expect(kinds.map(({ kind }) => kind).sort()).toEqual(['counted', 'poured', 'received'])
  })

  it('have a lot past its date that nobody has poured since, lots that soon are, and materials that run low', async () => {
    const today = new Date(now).toISOString().slice(0, 10)
    const expired = await rows<{ id: string, expires_on: string }>('SELECT l.id, l.expires_on FROM lots l JOIN lot_movements v ON v.lot_id = l.id WHERE l.expires_on < ? GROUP BY l.id HAVING SUM(v.grams) > 0', [today])
    expect(expired.length).toBeGreaterThanOrEqual(1)
    expect(await rows('SELECT p.id FROM batch_pours p JOIN lots l ON l.id = p.lot_id WHERE DATE(p.at) > l.expires_on')).toEqual([])
    expect(await rows('SELECT id FROM lots WHERE expires_on BETWEEN ? AND ? + INTERVAL 14 DAY', [today, today])).not.toEqual([])
    const low = await rows(`SELECT m.code, m.reorder_point_g FROM materials m JOIN lots l ON l.material_id = m.id AND l.expires_on >= ? JOIN lot_movements v ON v.lot_id = l.id
      GROUP BY m.id HAVING SUM(v.grams) < m.reorder_point_g`, [today])
    expect(low.length).toBeGreaterThanOrEqual(2)
    expect(await rows(`SELECT lot_id FROM lot_movements GROUP BY lot_id
      HAVING SUM(grams) > 0 AND SUM(grams) * 10 <= SUM(IF(kind = 'received', grams, 0))`)).not.toEqual([])
  })
})

describe('the pots of the demo shop', () => {
  it('follow their ratio but for those that were spoilt on purpose', async () => {
    const off = await rows<{ id: string }>(`SELECT DISTINCT c.batch_id AS id FROM batch_components c
      JOIN batch_components b ON b.batch_id = c.batch_id AND b.role = 'base' JOIN batches x ON x.id = c.batch_id AND x.outcome = 'mixed'
      WHERE c.role <> 'base' AND ABS(c.poured_g * b.parts / (b.poured_g * c.parts) - 1) > IF(c.role = 'hardener', 0.03, 0.05)`)
    const spoilt = [...made.report.deviations].filter(([, kind]) => kind === 'hardener-short' || kind === 'thinner-much').map(([id]) => id)
    expect(spoilt.length).toBeGreaterThan(0)
    expect(off.map(({ id }) => id).sort()).toEqual(spoilt.sort())
    const reviewed = await schema.db('batches').whereNot('review', '[]').select<{ id: string }[]>('id')
    expect(reviewed.map(({ id }) => id).sort()).toEqual(spoilt)
  })

  it('were late, past their life, corrected or stopped where that was meant, and nowhere else', async () => {
    const current = await schema.db('batch_current').select<{ batch_id: string, state: string, used: string | null, corrected: number }[]>('batch_id', 'state', 'used', 'corrected')
    const told = (row: (typeof current)[number]) => [
      ...(row.used === 'late' ? ['late'] : []), ...(row.used === 'past-life' ? ['past-life'] : []),
      ...(row.corrected ? ['over-pour'] : []), ...(row.state === 'stopped' ? ['stopped'] : []),
    ]
    for (const row of current) {
      const meant = made.report.deviations.get(row.batch_id)
      expect(told(row)).toEqual(meant !== undefined && !['hardener-short', 'thinner-much'].includes(meant) ? [meant] : [])
    }
    expect(made.report.deviations.size).toBeGreaterThanOrEqual(5)
  })

  it('are all emptied, with their waste booked and no timer left to ring', async () => {
    expect(await count('batch_current', (q) => void q.whereNotIn('state', ['emptied', 'stopped']))).toBe(0)
    expect(await count('timers', (q) => void q.where('subject_type', 'batch').whereIn('state', ['waiting', 'fired', 'acknowledged']))).toBe(0)
    expect(await count('timers', (q) => void q.where('state', 'waiting').where('due_at', '<', new Date(now - 60 * minuteMs)))).toBe(0)
    expect(await count('waste_entries')).toBeGreaterThan(made.report.batches / 2)
    expect(await count('batch_drafts', (q) => void q.where('state', 'open'))).toBe(0)
  })
})

describe('opening the demo shop for the day', () => {
  const live = async () => (await findPots({ liveAt: now }, schema.db)).filter(({ endsAt }) => endsAt !== null)
  const leftMin = (pot: { endsAt: string | null }) => (Date.parse(pot.endsAt ?? '') - now) / minuteMs

  it('mixes three pots in three booths: one about to ring, one about to close, one fresh', async () => {
    expect(await live()).toEqual([])
    expect(await openToday(context())).toMatchObject({ closed: 0, pots: 3 })
    const pots = await live()
    expect(new Set(pots.map(({ boothName }) => boothName)).size).toBe(3)
    expect(pots.map(({ state }) => state).sort()).toEqual(['closing', 'fresh', 'fresh'])
    const [soon, ...others] = pots
    expect(soon?.state).toBe('closing')
    expect(soon && leftMin(soon)).toBeCloseTo(3, 1)
    const closing = others.find(({ lateAt }) => Date.parse(lateAt ?? '') - now < 2 * minuteMs)
    expect(Date.parse(closing?.lateAt ?? '')).toBeGreaterThan(now)
    const fresh = others.find((pot) => pot !== closing)
    expect(fresh && leftMin(fresh)).toBeGreaterThan(90)
    expect(pots.filter(({ jobCode, purpose }) => jobCode === null && purpose === null)).toEqual([])
    expect(pots.some(({ jobCode }) => jobCode !== null)).toBe(true)
  })

  it('has something to mix, an open window and fresh air in every booth', async () => {
    const { today } = await readBench(context())
    expect(today.some(({ ready }) => ready === 'ready')).toBe(true)
    const windows = await windowsAt({}, now, schema.db)
    expect(windows.some(({ state }) => state === 'open' || state === 'closing')).toBe(true)
    const climate = [...(await latestClimate(schema.db)).values()]
    expect(climate).toHaveLength(3)
    for (const { at } of climate) expect(now - Date.parse(at)).toBeLessThanOrEqual(8 * 60 * minuteMs)
  })

  it('adds nothing the second time', async () => {
    const before = await count('batches')
    expect(await openToday(context())).toMatchObject({ closed: 0, pots: 0 })
    expect(await count('batches')).toBe(before)
    expect(await live()).toHaveLength(3)
  })

  it('empties what was forgotten on another day and begins that one with three new pots', async () => {
    const forgotten = (await live()).map(({ id }) => id)
    now += 20 * 60 * minuteMs
    expect(await openToday(context())).toMatchObject({ closed: 3, pots: 3 })
    const closed = await schema.db('batch_current').whereIn('batch_id', forgotten).select<{ state: string, leftover_weighed: number }[]>('state', 'leftover_weighed')
    expect(closed).toEqual(forgotten.map(() => ({ state: 'emptied', leftover_weighed: 0 })))
    expect(await live()).toHaveLength(3)
  })

  it('still finds something to mix after weeks in which nobody worked', async () => {
    for (let visit = 0; visit < 3; visit++) {
      now += 9 * 24 * 60 * minuteMs
      expect(await openToday(context())).toMatchObject({ pots: 3 })
      expect((await readBench(context())).today.some(({ ready }) => ready === 'ready')).toBe(true)
    }
    expect(await rows('SELECT lot_id FROM lot_movements GROUP BY lot_id HAVING SUM(grams) < 0')).toEqual([])
    expect((await verifyChain(schema.db)).ok).toBe(true)
  })
})

describe('the shop that this suite runs on', () => {
  it('has twelve weeks of work behind it', async () => {
    const suite = createKnex(process.env.DATABASE_URL ?? '', { poolMax: 1 })
    try {
      const [row] = await rows<{ days: number, n: string }>('SELECT DATEDIFF(UTC_DATE(), MIN(mixed_at)) AS days, COUNT(*) AS n FROM batches', [], suite)
      expect(row?.days).toBeGreaterThan(80)
      expect(row?.days).toBeLessThan(90)
      expect(Number(row?.n)).toBeGreaterThanOrEqual(350)
    } finally {
      await suite.destroy()
    }
  })
})

describe('making a first manager', () => {
  const run = promisify(execFile)
  const root = fileURLToPath(new URL('../..', import.meta.url))
  const password = 'long enough for a shop'
  const manager = ['--email', 'Ada@shop.example', '--name', 'Ada Maria Lind', '--shop', 'Lind', '--zone', 'Europe/Dublin']
  let empty: Schema
  beforeAll(async () => {
    empty = await openSchema(`manager_${randomUUID().slice(0, 8)}`)
  }, patience)
  afterAll(() => empty.drop())

  async function create(given: string, args: readonly string[]): Promise<{ code: number, stderr: string }> {
    const [here] = await rows<{ name: string }>('SELECT DATABASE() AS name', [], empty.db)
    const inside = (address: string | undefined) => {
      const url = new URL(address ?? '')
      url.pathname = `/${here?.name}`
      return url.href
    }
    const env = {
      ...process.env, DATABASE_URL: inside(process.env.DATABASE_URL), DATABASE_ADMIN_URL: inside(process.env.DATABASE_ADMIN_URL), POTBELL_MANAGER_PASSWORD: given,
    }
    return run(process.execPath, ['--import', 'tsx', 'seeds/create-manager.ts', ...args], { cwd: root, env })
      .then(({ stderr }) => ({ code: 0, stderr }), (failure: { code: number, stderr: string }) => failure)
  }

  it.each([
    ['at least 12 characters', 'short', manager],
    ['--name is missing', password, ['--email', 'a@shop.example']],
    ['--email is no e-mail address', password, ['--email', 'ada', '--name', 'Ada Lind']],
    ['--zone is no time zone', password, [...manager.slice(0, -1), 'Europe/Nowhere']],
    ['Unknown option', password, ['--nonsense']],
  ])('is refused with "%s"', async (said, given, args) => {
    const { code, stderr } = await create(given, args)
    expect(code).toBe(1)
    expect(stderr).toContain(said)
    expect(stderr).not.toContain(given)
    expect(stderr).not.toContain('    at ')
    expect(await rows('SELECT id FROM users', [], empty.db)).toEqual([])
  }, patience)

  it('fills an empty shop with what it needs, once', async () => {
    expect(await create(password, manager)).toMatchObject({ code: 0 })
    const [user, ...others] = await empty.db('users').select<{ email: string, initials: string, role: string, password_hash: string, demo_password: number }[]>()
    expect(others).toEqual([])
    expect(user).toMatchObject({ email: 'ada@shop.example', initials: 'AL', role: 'manager', demo_password: 0 })
    expect(await verifySecret(user?.password_hash ?? '', password)).toBe(true)
    expect(await readShop(empty.db)).toEqual({ name: 'Lind', zone: 'Europe/Dublin', currency: null, demo: false })
    expect(await rows('SELECT code FROM hazard_statements WHERE code = \'H226\'', [], empty.db)).toHaveLength(1)
    expect((await verifyChain(empty.db)).ok).toBe(true)
    expect((await create(password, manager)).stderr).toContain('has people in it already')
    expect(await makeDemo({ admin: empty.admin, app: empty.db }, { weeks, say: () => undefined })).toEqual({ made: false, why: 'foreign' })
  }, patience)
})
