import type { Knex } from 'knex'

/** What every screen needs to know about the shop. */
export interface ShopSettings {
  name: string
  /** IANA time zone. */
  zone: string
  demo: boolean
}

const fallback: ShopSettings = { name: 'Potbell', zone: 'UTC', demo: false }

/** The shop's name, time zone and whether it is the invented one; sensible values before anything is set. */
export async function readShop(db: Knex | Knex.Transaction): Promise<ShopSettings> {
  const rows = await db('settings').whereIn('name', ['shop', 'demo']).select<{ name: string; value: string }[]>('name', 'value')
  const values = Object.fromEntries(rows.map((row) => [row.name, JSON.parse(row.value) as unknown]))
  const shop = (values.shop ?? {}) as Partial<ShopSettings>
  return { name: shop.name ?? fallback.name, zone: shop.zone ?? fallback.zone, demo: values.demo === true }
}
