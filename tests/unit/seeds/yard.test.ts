import { beforeAll, describe, expect, it } from 'vitest'
import { hoursOf, workingDays } from '../../../seeds/demo/calendar'
import { orders } from '../../../seeds/demo/orders'
import { booths } from '../../../seeds/demo/places'
import { potLifeOf } from '../../../seeds/demo/pot'
import { randomOf } from '../../../seeds/demo/random'
import { reactiveAfterMs, Yard, type PlannedPot } from '../../../seeds/demo/yard'
import { paperJob, paperShop } from './builders'

const minuteMs = 60_000
const zone = 'Europe/Copenhagen'
const shop = paperShop()
/** Twelve weeks with a change of the clock in them. */
const days = workingDays('2026-09-08', '2026-12-01')
const airC = new Map(booths.map(({ key }) => [key, '22']))

const planned: { day: ReturnType<typeof hoursOf>, pots: PlannedPot[] }[] = []

beforeAll(() => {
  const random = randomOf(4)
  const yard = new Yard(shop, random)
  const taken = { 1: 0, 2: 0, 3: 0 }
  for (const day of days.map((one) => hoursOf(one, zone))) {
    for (const booth of [1, 2, 3] as const) {
      while (yard.backlog(booth) < 9) {
        const order = orders[booth][taken[booth]++ % orders[booth].length]
        if (!order) throw new Error('no orders')
        yard.admit(paperJob(order, `J-${booth}-${taken[booth]}`), day.opensAt)
      }
    }
    const quotas = new Map(booths.map(({ key }) => [key, key === 1 ? 3 : 2] as const))
    planned.push({ day, pots: yard.plan({ ...day, airC }, quotas, day.closesAt + 60 * minuteMs) })
  }
})

const all = () => planned.flatMap(({ pots }) => pots)

describe('the plan of a shop\'s day', () => {
  it('fills twelve weeks with six to ten pots on most days', () => {
    expect(all().length).toBeGreaterThan(350)
    expect(all().length).toBeLessThan(600)
    const usual = planned.filter(({ pots }) => pots.length >= 5 && pots.length <= 11)
    expect(usual.length * 10).toBeGreaterThan(planned.length * 8)
  })

  it('never has two pots at once in a booth, none in the break, none before opening', () => {
    for (const { day, pots } of planned) {
      for (const { key } of booths) {
        const here = pots.filter(({ booth }) => booth === key).sort((a, b) => a.startAt - b.startAt)
        for (const [index, pot] of here.entries()) expect(pot.startAt).toBeGreaterThanOrEqual(here[index - 1]?.closeAt ?? day.opensAt)
        expect(here.filter(({ startAt }) => startAt >= day.noonFrom && startAt < day.noonTo)).toEqual([])
      }
    }
  })

  it('sprays no coat before its window opens and hardly one after it has closed', () => {
    const coats = all().flatMap(({ task, firstAt }) => (task ? [{ ...task, firstAt }] : []))
    expect(coats.filter(({ firstAt, ready }) => firstAt < ready)).toEqual([])
    const missed = coats.filter(({ firstAt, deadline }) => deadline !== null && firstAt > deadline)
    expect(missed.length * 100).toBeLessThan(coats.length)
  })

  it('sprays every pot in its time, those aside that are late on purpose', () => {
    for (const { mix, startAt, lastAt, deviation } of all()) {
      const life = potLifeOf(shop.mixes.get(mix)?.current.revision ?? { parts: [] }, '22')
      if (!life) continue
      const lateAt = startAt + reactiveAfterMs + life.lateMin * minuteMs
      const endsAt = startAt + reactiveAfterMs + life.lifeMin * minuteMs
      if (deviation === 'past-life') expect(lastAt).toBeGreaterThan(endsAt)
      else if (deviation === 'late') expect(lastAt > lateAt && lastAt < endsAt).toBe(true)
      else expect(lastAt).toBeLessThan(lateAt)
    }
  })

  it('has every kind of mishap, and mixes a stopped pot again', () => {
    const mishaps = all().filter(({ deviation }) => deviation !== null)
    expect(new Set(mishaps.map(({ deviation }) => deviation)).size).toBe(6)
    expect(mishaps.length * 10).toBeLessThan(all().length)
    const stopped = mishaps.filter(({ deviation, startAt }) => deviation === 'stopped' && startAt < (planned.at(-5)?.day.opensAt ?? 0))
    for (const { task, startAt } of stopped) {
      const again = all().filter((pot) => pot.task?.job === task?.job && pot.task?.rack === task?.rack && pot.task?.stage === task?.stage && pot.startAt > startAt)
      expect(again).toHaveLength(1)
    }
  })

  it('gives each rack its coats in order', () => {
    const seen = new Map<string, number>()
    for (const { task, deviation } of all().sort((a, b) => a.firstAt - b.firstAt)) {
      if (!task || deviation === 'stopped') continue
      const key = `${task.job.code} ${task.rack}`
      expect(task.stage).toBe(seen.get(key) ?? 0)
      seen.set(key, task.stage + 1)
    }
  })
})
