import type { Knex } from 'knex'
import type { Settings } from '#shared/schemas/settings'
import { toInstant } from '../utils/rows'

/** What every screen needs to know about the shop. */
export interface ShopSettings {
  name: string
  /** IANA time zone. */
  zone: string
  /** ISO 4217; null: prices stand without one. */
  currency: string | null
  demo: boolean
}

const fallback: ShopSettings = { name: 'Potbell', zone: 'UTC', currency: null, demo: false }

/** The shop's name, time zone and whether it is the invented one; sensible values before anything is set. */
export async function readShop(db: Knex | Knex.Transaction): Promise<ShopSettings> {
  const rows = await db('settings').whereIn('name', ['shop', 'demo']).select<{ name: string; value: string }[]>('name', 'value')
  const values = Object.fromEntries(rows.map((row) => [row.name, JSON.parse(row.value) as unknown]))
  const shop = (values.shop ?? {}) as Partial<ShopSettings>
  return { name: shop.name ?? fallback.name, zone: shop.zone ?? fallback.zone, currency: shop.currency ?? fallback.currency, demo: values.demo === true }
}

/** The shop's IANA time zone in the value of its settings; UTC before they were ever set. */
export const zoneOf = (value: string | null): string => ((value === null ? {} : JSON.parse(value)) as Partial<ShopSettings>).zone ?? fallback.zone

/** The shop's settings with their version, held until the transaction ends where `trx` is one; version 0 before they were ever set. */
export async function readSettings(db: Knex | Knex.Transaction, { hold = false } = {}): Promise<Settings> {
  const query = db('settings').where({ name: 'shop' })
  if (hold) void query.forUpdate()
  const row = await query.first<{ value: string, version: number } | undefined>('value', 'version')
  const shop = (row ? JSON.parse(row.value) : {}) as Partial<ShopSettings>
  return { name: shop.name ?? fallback.name, zone: shop.zone ?? fallback.zone, currency: shop.currency ?? fallback.currency, version: row?.version ?? 0 }
}

export async function writeSettings({ version, ...shop }: Settings, now: number, trx: Knex.Transaction): Promise<void> {
  const at = toInstant(now)
  const value = JSON.stringify(shop)
  if (version === 0) await trx('settings').insert({ name: 'shop', value, created_at: at, updated_at: at })
  else await trx('settings').where({ name: 'shop' }).update({ value, updated_at: at, version: trx.raw('version + 1') })
}
