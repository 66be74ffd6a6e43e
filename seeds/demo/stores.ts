import { addDays } from '#shared/utils/zone'
import type { Context } from '../../server/utils/context'
import { newId } from '../../server/utils/ids'
import { toInstant } from '../../server/utils/rows'
import { mutate } from '../../server/utils/transactions'
import { born } from './found-places'
import type { DemoMaterial } from './materials'
import type { Random } from './random'
import { the, type DemoShop } from './shop'
import { gramsOf, type Tenths } from './weights'

/** What is left of one lot. */
export interface Lot {
  id: string
  materialCode: string
  expiresOn: string
  left: Tenths
}

/** A lot to be booked in. `counted`: what a stock count found, where it is less than was delivered. */
export interface Delivery {
  material: string
  delivered: Tenths
  receivedOn: string
  expiresOn?: string
  counted?: Tenths
}

/** The shop's tins, as the demo's own hands know them; the records say the same. */
export class Stores {
  readonly #lots: Lot[] = []
  readonly #shop: DemoShop
  readonly #random: Random

  constructor(shop: DemoShop, random: Random, lots: readonly Lot[] = []) {
    this.#shop = shop
    this.#random = random
    this.#lots.push(...lots)
  }

  /** What may still be poured of a material on a day. */
  usable(material: string, day: string): Tenths {
    return this.#offered(material, day).reduce((sum, { left }) => sum + left, 0)
  }

  /** Takes from the lots that expire first, tin by tin. */
  take(material: string, tenths: Tenths, day: string): { lotId: string, tenths: Tenths }[] {
    const taken: { lotId: string, tenths: Tenths }[] = []
    let wanted = tenths
    for (const lot of this.#offered(material, day)) {
      const part = Math.min(wanted, lot.left)
      if (part === 0) continue
      lot.left -= part
      wanted -= part
      taken.push({ lotId: lot.id, tenths: part })
    }
    if (wanted > 0) throw new Error(`the demo shop ran out of ${material}`)
    return taken
  }

  /** Books lots in, in one transaction. */
  receive(ctx: Context, deliveries: readonly Delivery[]): Promise<void> {
    return mutate(ctx, async (m) => {
      const made = deliveries.map((delivery) => ({ delivery, lot: this.#lotOf(delivery) }))
      await m.trx('lots').insert(made.map(({ delivery, lot }) => ({
        id: lot.id, material_id: the(this.#shop.materials, delivery.material).id, lot_number: this.#lotNumber(delivery.receivedOn),
        received_on: delivery.receivedOn, expires_on: lot.expiresOn, price_per_kg: this.#price(the(this.#shop.materials, delivery.material).material),
        place: placeOf(the(this.#shop.materials, delivery.material).material), state: delivery.counted === undefined ? 'sealed' : 'in-use',
        opened_at: delivery.counted === undefined ? null : toInstant(m.now), ...born(m.now),
      })))
      await m.trx('lot_movements').insert(made.flatMap(({ delivery, lot }) => movements(delivery, lot).map((movement) => ({
        ...movement, id: newId(), lot_id: lot.id, user_id: ctx.principal.user?.id ?? null, at: toInstant(m.now), created_at: toInstant(m.now),
      }))))
      m.audit({
        action: 'lots.received', subject: 'settings:shop',
        facts: { lots: made.map(({ delivery, lot }) => ({ id: lot.id, materialId: the(this.#shop.materials, delivery.material).id, grams: gramsOf(delivery.delivered), expiresOn: lot.expiresOn })) },
      })
      return made.map(({ lot }) => lot)
    }).then((lots) => void this.#lots.push(...lots))
  }

  /** Deliveries that a day's look at the shelves asks for. */
  wanted(day: string, materials: Iterable<DemoMaterial>): Delivery[] {
    return [...materials]
      .filter(({ code, reorderG }) => this.usable(code, day) < reorderG * 10)
      .map(({ code, deliveryG }) => ({ material: code, delivered: deliveryG * 10, receivedOn: day }))
  }

  #offered(material: string, day: string): Lot[] {
    return this.#lots
      .filter(({ materialCode, expiresOn, left }) => materialCode === material && expiresOn >= day && left > 0)
      .sort((a, b) => (a.expiresOn < b.expiresOn ? -1 : a.expiresOn > b.expiresOn ? 1 : 0))
  }

  #lotOf({ material, delivered, receivedOn, expiresOn, counted }: Delivery): Lot {
    const shelf = the(this.#shop.materials, material).material.shelfDays
    return { id: newId(), materialCode: material, expiresOn: expiresOn ?? addDays(receivedOn, shelf - this.#random.between(5, 30)), left: counted ?? delivered }
  }

  /** The maker's batch number on the tin. */
  #lotNumber(receivedOn: string): string {
    const [year = '', month = ''] = receivedOn.split('-')
    return `${this.#random.pick(['K', 'L', 'R', 'T'])}${year.slice(2)}${month}-${this.#random.between(1000, 9999)}`
  }

  /** A little around the list price, from delivery to delivery. */
  #price({ pricePerKg }: DemoMaterial): string {
    const [whole = '0', fraction = ''] = pricePerKg.split('.')
    const cents = parseInt(whole, 10) * 100 + parseInt(fraction.padEnd(2, '0'), 10)
    const moved = cents + Math.trunc((cents * this.#random.between(-4, 5)) / 100)
    return `${Math.trunc(moved / 100)}.${`${moved % 100}`.padStart(2, '0')}`
  }
}

function movements({ delivered, counted }: Delivery, lot: Lot) {
  const received = { kind: 'received', grams: gramsOf(delivered), reason: null }
  if (counted === undefined || counted === delivered) return [received]
  return [received, { kind: 'counted', grams: `-${gramsOf(delivered - lot.left)}`, reason: 'Weighed when the books were opened' }]
}

function placeOf({ role, chemistry }: DemoMaterial): string {
  if (role === 'peroxide') return 'Peroxide cabinet, cool'
  if (role === 'hardener') return 'Hardener shelf'
  if (role === 'thinner') return 'Solvent store'
  return chemistry === 'waterborne' ? 'Frost-free store' : 'Paint store'
}

/** What stood on the shelves when the books were opened. `today` is the day on which the demo ends. */
export function openingStock(ctxDay: string, today: string, materials: Iterable<DemoMaterial>, random: Random): Delivery[] {
  return [...materials].flatMap(({ code, deliveryG, reorderG }) => {
    const receivedOn = addDays(ctxDay, -random.between(8, 45))
    const delivered = deliveryG * 10
    const special = specialStock(code, delivered, today)
    if (special) return special.map((delivery) => ({ receivedOn, ...delivery }))
    const opened = { material: code, delivered, receivedOn, counted: Math.trunc((delivered * random.between(35, 95)) / 1000) * 10 }
    const sealed = Array.from({ length: 1 + Math.trunc(reorderG / deliveryG) }, () => ({ material: code, delivered, receivedOn }))
    return [opened, ...sealed]
  })
}

/** Lots that the demo needs just so: one past its date, two that soon are, and two materials that run low. */
function specialStock(code: string, delivered: Tenths, today: string): Omit<Delivery, 'receivedOn'>[] | null {
  const share = (thousandths: number) => Math.trunc((delivered * thousandths) / 1000)
  const lot = { material: code, delivered }
  if (code === 'P-710') return [{ ...lot, expiresOn: addDays(today, -9), counted: share(940) }, lot]
  if (code === 'P-610') return [{ ...lot, expiresOn: addDays(today, 6), counted: share(700) }]
  if (code === 'S-640') return [{ ...lot, expiresOn: addDays(today, 11), counted: share(280) }]
  if (code === 'U-905') return [{ ...lot, counted: share(80) }]
  return null
}
