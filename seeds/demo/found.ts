import type { Context } from '../../server/utils/context'
import { mutate } from '../../server/utils/transactions'
import { foundPeople, foundPlaces, foundSettings } from './found-places'
import { foundMaterials, foundMixes, foundSchedules, addMixRevision, addScheduleRevision } from './found-recipes'
import { mixes } from './mixes'
import { shop as theShop } from './places'
import { schedules } from './schedules'
import { the, type DemoShop } from './shop'

/** Writes everything that the shop has before its first batch, in one audited transaction. */
export function foundShop(ctx: Context): Promise<DemoShop> {
  return mutate(ctx, async (m) => {
    await foundSettings(m)
    const users = await foundPeople(m)
    const places = await foundPlaces(m)
    const made = await foundMaterials(m)
    const recipes = await foundMixes(m, { materials: made, users })
    const plans = await foundSchedules(m, { mixes: recipes, users })
    m.audit({ action: 'demo.founded', subject: 'settings:shop', facts: { users: users.size, materials: made.size, mixes: recipes.size, schedules: plans.size } })
    return { zone: theShop.zone, users, ...places, materials: made, mixes: recipes, schedules: plans }
  })
}

/** Puts the second revision of whatever has one in force, half-way through the shop's past. */
export function reviseShop(ctx: Context, shop: DemoShop): Promise<void> {
  return mutate(ctx, async (m) => {
    const revised: string[] = []
    for (const { code, revisions: [, second] } of mixes) {
      if (!second) continue
      const mix = the(shop.mixes, code)
      mix.current = await addMixRevision(m, shop, mix.id, 2, second)
      revised.push(`mix:${mix.id}`)
    }
    for (const { code, revisions: [, second] } of schedules) {
      if (!second) continue
      const schedule = the(shop.schedules, code)
      schedule.current = await addScheduleRevision(m, shop, schedule.id, 2, second)
      revised.push(`schedule:${schedule.id}`)
    }
    m.audit({ action: 'demo.revised', subject: 'settings:shop', facts: { revised } })
  })
}
