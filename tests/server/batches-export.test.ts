import { randomUUID } from 'node:crypto'
import { text } from 'node:stream/consumers'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import type { BatchExportQuery, BatchListItem } from '#shared/schemas/batches'
import { exportBatches, fileNameOf } from '../../server/services/batch-export'
import { listBatches } from '../../server/services/batch-log'
import { sealBatch } from '../../server/services/batches'
import { readShop } from '../../server/repositories/settings'
import { saveDraft } from '../../server/services/drafts'
import { draftBody, minutesIn, morning, poured } from '../factories/drafts'
import { signedIn } from './support/http'
import { openWorkshop, type Workshop } from './support/context'

const copies = 5_000
const hostile = '=HYPERLINK("http://away.example","press, here")\nsecond line'

let work: Workshop
let firstId: string

/** One batch through the services, and as many copies of its rows, a second apart each. */
beforeAll(async () => {
  work = await openWorkshop()
  work.clock.now = morning
  firstId = randomUUID()
  await saveDraft(work.as('sprayer'), firstId, draftBody(work.shop, { jobStepId: null, pieceIds: [], purpose: hostile, components: poured(work.shop, ['1450', '690', '290']) }))
  await sealBatch(work.as('sprayer'), { draftId: firstId })
  const [batch] = await work.admin('batches').where({ id: firstId })
  const { deviates: _reckoned, ...current } = await work.admin('batch_current').where({ batch_id: firstId }).first()
  const components = await work.admin('batch_components').where({ batch_id: firstId })
  const base = work.shop.materials.base
  for (let start = 0; start < copies; start += 500) {
    const made = Array.from({ length: 500 }, (_, place) => ({ id: randomUUID(), at: new Date(morning - (start + place + 1000) * 1000) }))
    await work.admin('batches').insert(made.map(({ id, at }, place) => ({ ...batch, id, mixed_at: at, code: `${start + place}-${work.shop.mark}`.slice(0, 16) })))
    await work.admin('batch_components').insert(made.flatMap(({ id }) => components.map((one: object) => ({ ...one, batch_id: id }))))
    await work.admin('batch_current').insert(made.map(({ id, at }) => ({ ...current, batch_id: id, mixed_at: at })))
    await work.admin('batch_uses').insert(made.map(({ id, at }) => ({ used_id: base, batch_id: id, mixed_at: at })))
  }
}, 180_000)
afterAll(() => work.close())

/** Reads RFC 4180: fields in quotes may hold commas, breaks and doubled quotes. */
function readTable(table: string): Record<string, string>[] {
  const lines: string[][] = [[]]
  for (const [, quoted, plain = '', end] of table.matchAll(/(?:"((?:[^"]|"")*)"|([^",\r\n]*))(,|\r\n|$)/g)) {
    lines.at(-1)?.push(quoted === undefined ? plain : quoted.replaceAll('""', '"'))
    if (end === '\r\n') lines.push([])
    if (end === '') break
  }
  const [head = [], ...rows] = lines.filter((cells) => cells.length > 1)
  return rows.map((cells) => Object.fromEntries(head.map((name, place) => [name, cells[place] ?? ''])))
}

async function table(query: BatchExportQuery): Promise<string> {
  const failures: Error[] = []
  const { stream } = await exportBatches(work.as('foreman'), query, (error) => void failures.push(error))
  const written = await text(stream)
  expect(failures).toEqual([])
  return written
}

async function listed(query: BatchExportQuery): Promise<BatchListItem[]> {
  const items: BatchListItem[] = []
  for (let cursor: string | undefined; ;) {
    const page = await listBatches(work.as('foreman'), { ...query, cursor, limit: 200 })
    items.push(...page.items)
    if (page.nextCursor === null) return items
    cursor = page.nextCursor
  }
}

describe('the log as a table', () => {
  it('holds every filtered row of the list, in its order, read a piece at a time', async () => {
    const query = { materialId: work.shop.materials.base }
    const asked: string[] = []
    const listen = ({ sql }: { sql: string }) => void asked.push(sql)
    work.db.on('query', listen)
    const rows = readTable(await table(query))
    work.db.off('query', listen)
    const items = await listed(query)
    expect(items).toHaveLength(copies + 1)
    expect(rows.map((row) => row.Batch)).toEqual(items.map(({ code }) => code))
    expect(asked.filter((sql) => sql.includes('page_at'))).toHaveLength(Math.ceil((copies + 1) / 500))
  }, 120_000)

  it('keeps the filters', async () => {
    const query = { materialId: work.shop.materials.base, from: '2026-11-17', to: '2026-11-17', mixedBy: work.shop.users.sprayer }
    expect(readTable(await table(query))).toHaveLength((await listed(query)).length)
    expect(readTable(await table({ ...query, mixedBy: work.shop.users.foreman }))).toEqual([])
  }, 60_000)

  it('names units and the decimal point, and shows the shop\'s time with its offset', async () => {
    const query = { lotId: work.shop.lots.base }
    const [row] = readTable(await table(query))
    const { zone } = await readShop(work.db)
    expect(row).toMatchObject({ 'Poured total (g, decimal point)': '2430', 'Furthest off the ratio (%, decimal point)': '-4.8276', 'Component furthest off': 'hardener', 'Out of tolerance': 'yes' })
    const mixed = row?.['Mixed (shop time with offset)'] ?? ''
    expect(Date.parse(mixed)).toBe(Date.parse(minutesIn(-8)))
    expect(mixed).toMatch(zone === 'UTC' ? /\+00:00$/ : /\+01:00$/)
  })

  it('runs no formula: text that begins like one is text, figures below nothing stay figures', async () => {
    const written = await table({ lotId: work.shop.lots.base })
    const [row] = readTable(written)
    expect(row?.['Purpose of a loose mix']).toBe(`'${hostile}`)
    expect(written).toContain('"\'=HYPERLINK(""http://away.example"",""press, here"")')
    expect(row?.['Furthest off the ratio (%, decimal point)']).toMatch(/^-\d/)
    expect(written.split('\r\n').at(-1)).toBe('')
  })

  it.each([
    [{ from: '2026-11-13', to: '2026-11-17' }, 'batches-2026-11-13-to-2026-11-17.csv'], [{ from: '2026-11-13' }, 'batches-2026-11-13-to-2026-11-18.csv'], [{}, 'batches-to-2026-11-18.csv'],
  ])('is named by its days: %j', (query, name) => {
    expect(fileNameOf(query, '2026-11-18')).toBe(name)
  })

  it('comes as a file over HTTP, and not to a booth\'s screen', async () => {
    const foreman = await signedIn('foreman')
    const answer = await foreman.get<string>('/api/batches/export.csv?from=2001-01-01&to=2001-01-02')
    expect(answer.status).toBe(200)
    expect(answer.headers.get('content-type')).toContain('text/csv; charset=utf-8')
    expect(answer.headers.get('content-disposition')).toBe('attachment; filename="batches-2001-01-01-to-2001-01-02.csv"')
    expect(answer.body.startsWith('Batch,Mixed (shop time with offset),')).toBe(true)
    expect((await foreman.get('/api/batches/export.csv?limit=5')).status).toBe(400)
  })
})
