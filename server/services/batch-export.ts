import { pipeline, Readable, type Transform } from 'node:stream'
import { stringify } from 'csv-stringify'
import type { BatchExportQuery, BatchListItem } from '#shared/schemas/batches'
import { guardedCell } from '#shared/utils/csv-guard'
import { shopDate, zonedIso } from '#shared/utils/zone'
import { listBatchRows, type BatchFilter } from '../repositories/batch-list'
import { readShop } from '../repositories/settings'
import type { Context } from '../utils/context'
import { filterOf } from './batch-log'

/** Rows read at a time; a table of any length takes no more memory than these. */
const chunk = 500

/** A table on its way out. */
export interface BatchExport {
  fileName: string
  stream: Transform
}

/**
 * The filtered rows of the log as a table for spreadsheets: RFC 4180 in UTF-8, a decimal point, times of the shop with
 * their offset. Read and written page by page.
 *
 * @param onFailure told when the table breaks off half-way; who reads it notices by the broken connection
 * @throws Refusal 403 when a screen asks for another booth
 */
export async function exportBatches(ctx: Context, query: BatchExportQuery, onFailure: (error: Error) => void): Promise<BatchExport> {
  const { zone } = await readShop(ctx.db)
  const filter = await filterOf(ctx, query)
  const columns = columnsOf(zone)
  const lines = Readable.from(rowsOf(ctx, filter, (item) => columns.map(({ cell }) => cell(item))))
  const table = stringify({ header: true, columns: columns.map(({ name }) => ({ key: name, header: name })), record_delimiter: '\r\n' })
  // The reader may leave before the end: that is its own business.
  pipeline(lines, table, (error) => {
    if (error && (error as NodeJS.ErrnoException).code !== 'ERR_STREAM_PREMATURE_CLOSE') onFailure(error)
  })
  return { fileName: fileNameOf(query, shopDate(await ctx.clock.now(ctx.db), zone)), stream: table }
}

async function* rowsOf(ctx: Context, filter: Omit<BatchFilter, 'limit'>, toRow: (item: BatchListItem) => string[]): AsyncGenerator<string[]> {
  let after: BatchFilter['after']
  for (;;) {
    const rows = await listBatchRows({ ...filter, after, limit: chunk }, ctx.db)
    for (const { item } of rows) yield toRow(item)
    const last = rows.at(-1)
    if (!last || rows.length < chunk) return
    after = { mixedAt: last.sortedAt, id: last.item.id }
  }
}

/** `batches-2026-11-13-to-2026-11-17.csv`; an open beginning has none. */
export function fileNameOf({ from, to }: Pick<BatchExportQuery, 'from' | 'to'>, today: string): string {
  return `batches-${from ? `${from}-` : ''}to-${to ?? today}.csv`
}

interface Column {
  name: string
  cell: (item: BatchListItem) => string
}

const text = (name: string, read: (item: BatchListItem) => string | null): Column => ({ name, cell: (item) => guardedCell(read(item)) })
/** Decimals as the API has them: a point, no thousands. */
const figure = (name: string, read: (item: BatchListItem) => string | null): Column => ({ name, cell: (item) => read(item) ?? '' })
const yes = (flag: boolean) => (flag ? 'yes' : 'no')

const outcomes = { mixed: 'mixed', stopped: 'stopped' } as const
const uses = { 'in-time': 'in time', 'late': 'late', 'past-life': 'past its pot life' } as const

function columnsOf(zone: string): Column[] {
  const time = (name: string, read: (item: BatchListItem) => string | null): Column => ({
    name: `${name} (shop time with offset)`,
    cell: (item) => {
      const at = read(item)
      return at === null ? '' : zonedIso(Date.parse(at), zone)
    },
  })
  return [
    text('Batch', ({ code }) => code), time('Mixed', ({ mixedAt }) => mixedAt), text('Job', ({ jobCode }) => jobCode), text('Job title', ({ jobTitle }) => jobTitle),
    text('Step', ({ stepTitle }) => stepTitle), text('Purpose of a loose mix', ({ purpose }) => purpose), text('Mix', ({ mixCode }) => mixCode),
    text('Mix name', ({ mixName }) => mixName), figure('Mix revision', ({ mixRevisionNumber }) => String(mixRevisionNumber)), text('Base', ({ baseCode }) => baseCode),
    figure('Pot', ({ potNumber }) => String(potNumber)), figure('Pots of the plan', ({ potCount }) => String(potCount)), text('Outcome', ({ outcome }) => outcomes[outcome]),
    text('State', ({ state }) => state.replaceAll('-', ' ')), text('Sprayer', ({ mixedByName }) => mixedByName), text('Booth', ({ boothName }) => boothName),
    text('Gun', ({ gunName }) => gunName), figure('Target total (g, decimal point)', ({ targetTotalG }) => targetTotalG),
    figure('Poured total (g, decimal point)', ({ pouredTotalG }) => pouredTotalG), figure('Furthest off the ratio (%, decimal point)', ({ worstDeviationPct }) => worstDeviationPct),
    text('Component furthest off', ({ worstRole }) => worstRole), text('Out of tolerance', ({ outOfTolerance }) => yes(outOfTolerance)),
    text('Corrected', ({ corrected }) => yes(corrected)), time('Pot life began', ({ reactiveAt }) => reactiveAt), time('Late from', ({ lateAt }) => lateAt),
    time('Pot life ended', ({ endsAt }) => endsAt), time('First spray', ({ firstSprayAt }) => firstSprayAt), time('Last spray', ({ lastSprayAt }) => lastSprayAt),
    text('Used', ({ used }) => used && uses[used]), time('Emptied', ({ closedAt }) => closedAt), figure('Left over (g, decimal point)', ({ leftoverG }) => leftoverG),
    text('Left over weighed', ({ leftoverWeighed }) => (leftoverWeighed === null ? null : yes(leftoverWeighed))), text('Disposal', ({ disposal }) => disposal),
    text('Waits for review', ({ reviewOpen }) => yes(reviewOpen)), text('Amended', ({ amended }) => yes(amended)),
  ]
}
