import { D } from '#shared/engine/decimal'
import type { Material, MaterialItem, MaterialListQuery } from '#shared/schemas/materials'
import { daysBetween } from '#shared/utils/zone'
import { listLotsOfMaterial } from '../repositories/lots'
import { findMaterial, hazardTexts, listMaterials, stockOf, usesOf, type MaterialStock, type StoredMaterial } from '../repositories/materials'
import type { Context } from '../utils/context'
import { notFound } from '../utils/errors'
import { describeLots } from './lots'
import { pageOf, readCursor, type Page } from './paging'
import { shopDay } from './shop'

const noStock: MaterialStock = { usableStockG: '0', lockedStockG: '0', usableLotCount: 0, nearestExpiresOn: null }

/** True when the usable stock is at or below the reorder point. */
export function needsReorder(usableStockG: string, reorderPointG: string | null): boolean {
  return reorderPointG !== null && new D(usableStockG).lte(reorderPointG)
}

function describe(material: StoredMaterial, stock: MaterialStock, today: string): MaterialItem {
  return {
    id: material.id,
    code: material.code,
    name: material.name,
    role: material.role,
    chemistry: material.chemistry,
    containsIsocyanates: material.containsIsocyanates,
    signalWord: material.signalWord,
    supplier: material.supplier,
    pricePerKg: material.pricePerKg,
    reorderPointG: material.reorderPointG,
    densityGPerMl: material.densityGPerMl,
    solidsPct: material.solidsPct,
    reactsPct: material.reactsPct,
    vocGPerL: material.vocGPerL,
    vocPct: material.vocPct,
    waterPct: material.waterPct,
    exemptPct: material.exemptPct,
    shelfLifeDays: material.shelfLifeDays,
    ...stock,
    nearestExpiresInDays: stock.nearestExpiresOn === null ? null : daysBetween(today, stock.nearestExpiresOn),
    reorder: needsReorder(stock.usableStockG, material.reorderPointG),
    archived: material.archived,
    version: material.version,
  }
}

/** A page of materials by code, with what of each may be used today. */
export async function materialsPage(ctx: Context, query: MaterialListQuery): Promise<Page<MaterialItem>> {
  const { today } = await shopDay(ctx)
  const [after = null] = readCursor(query.cursor, ['text']) ?? []
  const stored = await listMaterials(query, { after, limit: query.limit + 1 }, ctx.db)
  const page = pageOf(stored, query.limit, last => [last.code])
  const stock = await stockOf(page.items.map(material => material.id), today, ctx.db)
  return {
    items: page.items.map(material => describe(material, stock.get(material.id) ?? noStock, today)),
    nextCursor: page.nextCursor,
  }
}

/**
 * A material with its lots, first the one that runs out of date first, and the mixes that take it.
 * @throws Refusal 404 when there is none
 */
export async function materialById(ctx: Context, id: string): Promise<Material> {
  const stored = await findMaterial(id, ctx.db)
  if (!stored) throw notFound('The material')
  const { today } = await shopDay(ctx)
  const [stock, lots, hazards, usedIn] = await Promise.all([
    stockOf([id], today, ctx.db),
    listLotsOfMaterial(id, ctx.db),
    hazardTexts(stored.hazardCodes, ctx.db),
    usesOf(id, ctx.db),
  ])
  const { hazardCodes: _codes, ...material } = stored
  return {
    ...material,
    ...describe(stored, stock.get(id) ?? noStock, today),
    hazards,
    lots: await describeLots(lots, today, ctx),
    usedIn,
  }
}
