import { beforeAll, describe, expect, it } from 'vitest'
import * as z from 'zod/mini'
import { hazardText } from '#shared/reference/hazard-statements'
import { Job, JobList } from '#shared/schemas/jobs'
import { Lot, LotList, lotConditions, type LotItem } from '#shared/schemas/lots'
import { Material, MaterialList } from '#shared/schemas/materials'
import { Mix, MixList } from '#shared/schemas/mixes'
import { Schedule, ScheduleList } from '#shared/schemas/schedules'
import { BoothList, GunList, MixingCupList, ScaleList, UserList } from '#shared/schemas/shop'
import { D } from '../../shared/engine/decimal'
import { Client, signedInOften } from './support/http'

interface Page<T> {
  items: T[]
  nextCursor: string | null
}

let manager: Client
let sprayer: Client
beforeAll(async () => {
  manager = await signedInOften('manager')
  sprayer = await signedInOften('sprayer')
})

/** Lists with the shape of their answer. */
const lists = [
  ['/api/materials', MaterialList], ['/api/lots', LotList], ['/api/mixes', MixList], ['/api/schedules', ScheduleList], ['/api/jobs', JobList],
  ['/api/booths', BoothList], ['/api/guns', GunList], ['/api/scales', ScaleList], ['/api/mixing-cups', MixingCupList], ['/api/users', UserList],
] as const

/** One thing of each list that has pages of its own. */
const things = [
  ['/api/materials', Material], ['/api/lots', Lot], ['/api/mixes', Mix], ['/api/schedules', Schedule], ['/api/jobs', Job],
] as const

/** Walks all pages of a list. */
async function all<T extends { id: string }>(path: string, limit = 200): Promise<T[]> {
  const items: T[] = []
  const join = path.includes('?') ? '&' : '?'
  for (let cursor: string | null = ''; cursor !== null;) {
    const { status, body }: { status: number, body: Page<T> } = await manager.get(`${path}${join}limit=${limit}${cursor && `&cursor=${cursor}`}`)
    expect(status).toBe(200)
    items.push(...body.items)
    cursor = body.nextCursor
  }
  return items
}

const shape = (schema: z.ZodMiniType, value: unknown): string => JSON.stringify(z.safeParse(schema, value).error?.issues ?? 'fits')

describe.each(lists)('GET %s', (path, schema) => {
  it('answers a page in its shape', async () => {
    const { status, body } = await manager.get<Page<unknown>>(path)
    expect(status).toBe(200)
    expect(shape(schema, body)).toBe('"fits"')
    expect(body.items.length).toBeGreaterThan(0)
  })

  it('pages over every row once, in one order, whatever the size of a page', async () => {
    const whole = await all(path)
    const small = await all(path, 3)
    expect(small.map(item => item.id)).toEqual(whole.map(item => item.id))
    expect(new Set(whole.map(item => item.id)).size).toBe(whole.length)
  })

  it.each(['limit=0', 'limit=201', 'limit=ten', 'limit=-1', 'cursor=!!', 'cursor=bm9uc2Vuc2U', 'cursor=WyIiXQ', 'colour=white', 'limit=5&limit=6'])('refuses ?%s with 400', async (query) => {
    const { status, body } = await manager.get<{ code: string, fields: { path: string }[] }>(`${path}?${query}`)
    expect(status).toBe(400)
    expect(body.code).toBe('invalid')
    expect(body.fields.length).toBeGreaterThan(0)
  })

  it('asks to sign in', async () => {
    expect((await new Client().get(path)).status).toBe(401)
  })
})

describe.each(things)('GET %s/{id}', (path, schema) => {
  it('answers every row of the list in its shape', async () => {
    for (const { id } of (await all(path)).slice(0, 40)) {
      const { status, body } = await manager.get(`${path}/${id}`)
      expect(status).toBe(200)
      expect(shape(schema, body), `${path}/${id}`).toBe('"fits"')
      expect(body.id).toBe(id)
    }
  })

  it('is 404 for what is not there and 400 for what is no id', async () => {
    expect((await manager.get(`${path}/00000000-0000-4000-8000-000000000000`)).status).toBe(404)
    expect((await manager.get(`${path}/J-1`)).status).toBe(400)
  })

  it('asks to sign in', async () => {
    expect((await new Client().get(`${path}/00000000-0000-4000-8000-000000000000`)).status).toBe(401)
  })
})

describe('people', () => {
  it('are shown to seniors only, without a secret', async () => {
    expect((await sprayer.get('/api/users')).status).toBe(403)
    const { body } = await manager.get('/api/users')
    expect(JSON.stringify(body)).not.toMatch(/hash|"password|pin"/i)
  })
})

describe('lots', () => {
  it('of each state together are all lots, each once and by its own word', async () => {
    const whole = await all<LotItem>('/api/lots')
    const byState = await Promise.all(lotConditions.map(async condition => [condition, await all<LotItem>(`/api/lots?state=${condition}`)] as const))
    for (const [condition, items] of byState) expect(items.every(lot => lot.condition === condition), condition).toBe(true)
    expect(byState.flatMap(([, items]) => items.map(lot => lot.id)).sort()).toEqual(whole.map(lot => lot.id).sort())
  })

  it('come first-expiring first when asked, those without a day last', async () => {
    const days = (await all<LotItem>('/api/lots?order=first-expiring', 4)).map(lot => lot.expiresOn ?? '9999-12-31')
    expect(days).toEqual([...days].sort())
  })

  it('are filtered by material, by low stock, by use and by days left', async () => {
    const whole = await all<LotItem>('/api/lots')
    const materialId = whole[0]?.materialId
    const ids = (items: LotItem[]) => items.map(lot => lot.id).sort()
    expect(ids(await all(`/api/lots?materialId=${materialId}`))).toEqual(ids(whole.filter(lot => lot.materialId === materialId)))
    expect(ids(await all('/api/lots?low=true'))).toEqual(ids(whole.filter(lot => lot.low)))
    expect(ids(await all('/api/lots?usable=true'))).toEqual(ids(whole.filter(lot => ['in-use', 'sealed', 'runs-out'].includes(lot.condition))))
    expect(ids(await all('/api/lots?expiresWithinDays=60')))
      .toEqual(ids(whole.filter(lot => lot.state !== 'empty' && lot.expiresInDays !== null && lot.expiresInDays <= 60)))
  })

  it('hold the sum of their movements, and the working ends in it', async () => {
    const used = (await all<LotItem>('/api/lots')).filter(lot => lot.batchCount > 0).slice(0, 15)
    expect(used.length).toBeGreaterThan(0)
    for (const { id } of used) {
      const { body: lot } = await manager.get<Lot>(`/api/lots/${id}`)
      const sum = lot.movements.reduce((total, movement) => total.plus(movement.grams), new D(0))
      expect(sum.toString()).toBe(new D(lot.stockG).toString())
      expect(lot.stockWorking.at(-1)?.value).toBe(new D(lot.stockG).toString())
      expect(lot.batches).toHaveLength(lot.batchCount)
    }
  })
})

describe('materials', () => {
  it('carry the sentences of hazard word for word', async () => {
    const { body: page } = await manager.get<MaterialList>('/api/materials')
    const materials = await Promise.all(page.items.map(async ({ id }) => (await manager.get<Material>(`/api/materials/${id}`)).body))
    const hazards = materials.flatMap(material => material.hazards)
    expect(hazards.length).toBeGreaterThan(0)
    for (const { code, text } of hazards) expect(text).toBe(hazardText(code))
  })

  it('count only what may be used today as stock', async () => {
    for (const { id, usableStockG, lockedStockG } of (await all<MaterialList['items'][number]>('/api/materials'))) {
      const lots = await all<LotItem>(`/api/lots?materialId=${id}`)
      const sum = (items: LotItem[]) => items.reduce((total, lot) => total.plus(lot.stockG), new D(0)).toString()
      const usable = lots.filter(lot => ['in-use', 'sealed', 'runs-out'].includes(lot.condition))
      expect(new D(usableStockG).toString()).toBe(sum(usable))
      expect(new D(lockedStockG).toString()).toBe(sum(lots.filter(lot => !usable.includes(lot))))
    }
  })

  it('are found by role, chemistry and words, with % and _ meaning themselves', async () => {
    const whole = await all<MaterialList['items'][number]>('/api/materials')
    const some = whole[0]
    expect((await all<MaterialList['items'][number]>(`/api/materials?role=${some?.role}`)).every(item => item.role === some?.role)).toBe(true)
    expect((await all<MaterialList['items'][number]>(`/api/materials?chemistry=${some?.chemistry}`)).map(item => item.id)).toContain(some?.id)
    expect((await all<MaterialList['items'][number]>(`/api/materials?q=${encodeURIComponent(some?.code.toLowerCase() ?? '')}`)).map(item => item.id)).toContain(some?.id)
    expect(await all('/api/materials?q=%25')).toEqual([])
    expect(await all('/api/materials?q=_')).toEqual([])
  })
})

describe('mixes', () => {
  it('share out to a hundred per cent and name what starts the pot life', async () => {
    for (const { id } of await all('/api/mixes')) {
      const { body } = await manager.get<Mix>(`/api/mixes/${id}`)
      const shares = body.current?.components.map(component => component.sharePct ?? '0') ?? []
      const sum = shares.reduce((total, share) => total.plus(share), new D(0))
      expect(sum.minus(100).abs().lte('0.000000000008'), `${id}: ${sum.toString()}`).toBe(true)
      const reacts = body.current?.components.some(component => component.reactive) ?? false
      if (body.current?.potLifeIs) expect(reacts).toBe(true)
    }
  })

  it('are found by a material that their revision in use takes', async () => {
    const [first] = await all('/api/mixes')
    const { body: mix } = await manager.get<Mix>(`/api/mixes/${first?.id}`)
    const materialId = mix.current?.components[0]?.materialId
    expect((await all(`/api/mixes?materialId=${materialId}`)).map(item => item.id)).toContain(mix.id)
  })
})

describe('schedules', () => {
  it('show another revision when asked, and refuse one of another schedule', async () => {
    const schedules = await Promise.all((await all('/api/schedules')).map(async ({ id }) => (await manager.get<Schedule>(`/api/schedules/${id}`)).body))
    const revised = schedules.find(schedule => schedule.revisions.length > 1)
    const older = revised?.revisions.at(-1)
    const { body } = await manager.get<Schedule>(`/api/schedules/${revised?.id}?revisionId=${older?.id}`)
    expect(body.revision?.number).toBe(older?.number)
    const other = schedules.find(schedule => schedule.id !== revised?.id)
    expect((await manager.get(`/api/schedules/${other?.id}?revisionId=${older?.id}`)).status).toBe(404)
  })
})

describe('jobs', () => {
  it('come by state, and open ones leave out what is done', async () => {
    type Item = JobList['items'][number]
    const whole = await all<Item>('/api/jobs')
    const open = await all<Item>('/api/jobs?state=open', 5)
    expect(open.map(job => job.id)).toEqual(whole.filter(job => job.state !== 'done').map(job => job.id))
    const done = (await all<Item>('/api/jobs?state=done', 5)).map(job => job.dueOn ?? '9999-12-31')
    expect(done).toEqual([...done].sort().reverse())
  })

  it('add their pieces\' areas up exactly, each with its own sum', async () => {
    for (const { id } of (await all('/api/jobs?state=open')).slice(0, 10)) {
      const { body: job } = await manager.get<Job>(`/api/jobs/${id}`)
      const sum = job.pieces.reduce((total, piece) => total.plus(piece.areaM2), new D(0))
      expect(new D(job.areaM2).toString()).toBe(sum.toString())
      for (const piece of job.pieces) {
        expect(piece.areaWorking.at(-1)?.value).toBe(new D(piece.areaM2).toString())
        expect(piece.stepStates).toHaveLength(job.stepCount)
      }
      expect(job.steps.filter(step => step.state === 'done')).toHaveLength(job.doneStepCount)
    }
  })

  it('need of each material what their lines add up to', async () => {
    const jobs = await Promise.all((await all('/api/jobs?state=open')).slice(0, 10).map(async ({ id }) => (await manager.get<Job>(`/api/jobs/${id}`)).body))
    const needs = jobs.flatMap(job => job.needs)
    expect(needs.length).toBeGreaterThan(0)
    for (const need of needs) {
      expect(new D(need.usableStockG).minus(need.neededG).toString()).toBe(new D(need.afterG).toString())
      expect(need.working.at(-1)?.value).toBe(need.neededG)
      expect(need.short).toBe(new D(need.afterG).isNegative())
    }
  })
})
