import { clamp } from './draw-scale'

const MIN = 60_000
const HOUR = 60 * MIN
const DAY = 24 * HOUR

/** Major and minor tick of a time bar, finest first. */
const STEPS: readonly (readonly [major: number, minor: number])[] = [
  [MIN, MIN / 4], [5 * MIN, MIN], [10 * MIN, 5 * MIN], [30 * MIN, 10 * MIN], [HOUR, 15 * MIN], [2 * HOUR, 30 * MIN],
  [4 * HOUR, HOUR], [6 * HOUR, HOUR], [12 * HOUR, 2 * HOUR], [DAY, 6 * HOUR], [2 * DAY, 12 * HOUR], [5 * DAY, DAY], [10 * DAY, DAY],
]

function firstStep(spanMs: number): number {
  if (spanMs <= 10 * MIN) return 0
  if (spanMs <= 40 * MIN) return 2
  if (spanMs <= 150 * MIN) return 3
  return spanMs <= 48 * HOUR ? 4 : 9
}

/** Ticks that suit a life: 1 h and 15 min over 150 min, 30 and 10 min under, 1 d and 6 h over 48 h; coarser where labels would touch. */
export function lifeSteps(spanMs: number, widthPx: number, labelPx: number): { major: number, minor: number } {
  let place = firstStep(spanMs)
  while (place < STEPS.length - 1 && (STEPS[place]?.[0] ?? DAY) / spanMs * widthPx < labelPx) place += 1
  const [major, minor] = STEPS[place] ?? [DAY, 6 * HOUR]
  return { major, minor }
}

/** What a tick of the life ruler reads: time left, `30 min`, `1 h 30`, `2 d`. */
export function leftLabel(ms: number): string {
  if (ms >= DAY && ms % DAY === 0) return `${ms / DAY} d`
  const minutes = Math.round(ms / MIN)
  if (minutes < 60) return `${minutes} min`
  return minutes % 60 ? `${Math.floor(minutes / 60)} h ${minutes % 60}` : `${minutes / 60} h`
}

export interface LifeTick {
  x: number
  major: boolean
  label: string
  labelX: number
}

export interface LifeBarInput {
  spanMs: number
  width: number
  pad: number
  fontPx: number
  /** Widths taken by the times under both ends; 0 where none stands. */
  startLabelPx: number
  endLabelPx: number
}

/** Ticks of the ruler under a life bar: they count back from the end, so that the index reads what is left. */
export function lifeTicks(input: LifeBarInput): LifeTick[] {
  const { spanMs, width, pad, fontPx } = input
  const inner = width - 2 * pad
  const { major, minor } = lifeSteps(spanMs, inner, fontPx * 4.2)
  const x = (leftMs: number): number => pad + inner * (1 - leftMs / spanMs)
  const gap = fontPx * 0.45
  const count = Math.floor(spanMs / minor + 1e-9)
  return Array.from({ length: count }, (_, place) => {
    const left = (place + 1) * minor
    const isMajor = left % major === 0
    const text = isMajor && left < spanMs ? leftLabel(left) : ''
    const half = text.length * fontPx * 0.27
    const labelX = Math.min(x(left), width - pad - input.endLabelPx - gap - half)
    const touchesStart = labelX - half < pad + input.startLabelPx + gap
    const movedFar = x(left) - labelX > fontPx * 1.6
    return { x: x(left), major: isMajor, label: touchesStart || movedFar ? '' : text, labelX }
  })
}

export interface WindowSpan {
  opensAt: number
  closesAt: number | null
  closingAt: number | null
  coatFrom?: number
  now?: number
}

/** Share of the bar that stands empty before and after what is known. */
const MARGIN = 0.18

/** The stretch of time a window bar shows when the page names none: coat, window and now, with room after the close. */
export function windowRange(span: WindowSpan): { from: number, to: number } {
  const known = [span.opensAt, span.closesAt, span.coatFrom, span.now].filter(at => at !== undefined && at !== null)
  const from = Math.min(...known)
  const last = Math.max(...known)
  const length = Math.max(last - from, HOUR)
  return { from: from - (span.coatFrom === undefined ? length * MARGIN : 0), to: from + length * (1 + MARGIN) }
}

/** A linear scale from instants to px, held inside the bar. */
export function timeScale(from: number, to: number, pad: number, width: number): (at: number) => number {
  return at => pad + (width - 2 * pad) * clamp((at - from) / (to - from), 0, 1)
}

/** Two time labels under a bar, moved apart and kept inside it. Centres in px. */
export function pairLabels(first: number, second: number, labelPx: number, width: number): [number, number] {
  const half = labelPx / 2
  const least = labelPx + 6
  const middle = clamp((first + second) / 2, half + least / 2, width - half - least / 2)
  const apart = second - first >= least
  return [clamp(apart ? first : middle - least / 2, half, width - half), clamp(apart ? second : middle + least / 2, half, width - half)]
}
