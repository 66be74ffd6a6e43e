import { addDays, startOfShopDay } from '#shared/utils/zone'
import { workingHours } from './places'

const minuteMs = 60_000

/** Minutes after midnight of `07:30`. */
function minutesOf(clock: string): number {
  const [hours = '', minutes = ''] = clock.split(':')
  return parseInt(hours, 10) * 60 + parseInt(minutes, 10)
}

/** An instant of the shop's wall clock on a day; epoch milliseconds. Not for the hour of a clock change. */
export const at = (day: string, zone: string, clock: string): number => startOfShopDay(day, zone) + minutesOf(clock) * minuteMs

/** True from Monday to Friday. */
export function isWorkingDay(day: string): boolean {
  const weekday = new Date(`${day}T00:00:00Z`).getUTCDay()
  return (workingHours.days as readonly number[]).includes(weekday)
}

/** Working days from one day to another, both included. */
export function workingDays(from: string, to: string): string[] {
  const days: string[] = []
  for (let day = from; day <= to; day = addDays(day, 1)) if (isWorkingDay(day)) days.push(day)
  return days
}

/** The first working day after a day. */
function nextWorkingDay(day: string): string {
  const next = addDays(day, 1)
  return isWorkingDay(next) ? next : nextWorkingDay(next)
}

/** The opening, break and closing of a day; epoch milliseconds. */
export function hoursOf(day: string, zone: string) {
  const [pause] = workingHours.breaks
  if (!pause) throw new Error('the shop has no break')
  return {
    day, opensAt: at(day, zone, workingHours.from), noonFrom: at(day, zone, pause.from), noonTo: at(day, zone, pause.to), closesAt: at(day, zone, workingHours.to),
    reopensAt: at(nextWorkingDay(day), zone, workingHours.from),
  }
}
