import { clamp, minorStep, niceStep, px, stepDecimals, ticksBetween, type Tick } from './draw-scale'

/** Size of the drawing and of the gutters that hold scale and labels, in px. */
export interface CupFrame {
  width: number
  height: number
  left: number
  right: number
  /** Room for the note under the foot. */
  note: boolean
}

export interface CupGeometry {
  top: number
  bottom: number
  centre: number
  rimHalf: number
  footHalf: number
  /** Half the width of the cup at a height. */
  halfAt: (y: number) => number
  /** Height of the surface when the cup holds this share of its capacity, 0 to 1; spaced by true volume of a tapered cup. */
  yAt: (share: number) => number
  /** Outline of the wall, `inset` px inside. */
  outline: (inset: number) => string
}

const RIM_Y = 20
const FOOT_ROOM = 18
const NOTE_ROOM = 18
const TAPER = 0.82
const CORNER = 12
/** A little over the brim can still be drawn; more would leave the cup. */
const BRIM = 1.04

/** The cup: tapered, graduations closing up towards the rim because a higher ring holds more. */
export function cupGeometry(frame: CupFrame): CupGeometry {
  const top = RIM_Y
  const bottom = frame.height - FOOT_ROOM - (frame.note ? NOTE_ROOM : 0)
  const inner = frame.width - frame.left - frame.right
  const rimHalf = inner / 2 - 10
  const footHalf = rimHalf * TAPER
  const centre = frame.left + inner / 2
  const halfAt = (y: number): number => footHalf + (rimHalf - footHalf) * (bottom - y) / (bottom - top)
  const floor = bottom - 7
  const full = top + 14
  const low = halfAt(floor) - 7
  const high = halfAt(full) - 7
  const yAt = (share: number): number => {
    const radius = Math.cbrt(low ** 3 + clamp(share, 0, BRIM) * (high ** 3 - low ** 3))
    return floor - (floor - full) * (radius - low) / (high - low)
  }
  const outline = (inset: number): string => {
    const rim = rimHalf - inset
    const foot = footHalf - inset
    const base = bottom - inset * 0.9
    return `M${px(centre - rim)} ${top}L${px(centre - foot)} ${px(base - CORNER)}Q${px(centre - foot + 1)} ${px(base)} ${px(centre - foot + CORNER)} ${px(base)}`
      + `H${px(centre + foot - CORNER)}Q${px(centre + foot - 1)} ${px(base)} ${px(centre + foot)} ${px(base - CORNER)}L${px(centre + rim)} ${top}`
  }
  return { top, bottom, centre, rimHalf, footHalf, halfAt, yAt, outline }
}

/** Graduations of a cup, wide enough apart to be read at this height. */
export function cupTicks(capacityG: number, heightPx: number): { ticks: Tick[], decimals: number } {
  const major = niceStep(capacityG, heightPx / 45)
  const minor = minorStep(major, heightPx / capacityG, 4.5)
  return { ticks: ticksBetween(0, capacityG, minor, major), decimals: stepDecimals(major) }
}

export interface CupLayer {
  pouredG: number
  targetG: number
}

/** One drawn layer: from `fromG` filled up to `filledG`, from there to `toG` still to come. Grams from the floor. */
export interface CupBand {
  fromG: number
  filledG: number
  toG: number
  /** Where the index of this layer stands. */
  indexG: number
  state: 'poured' | 'active' | 'to-come'
}

/**
 * Stacks the layers bottom to top in pouring order.
 *
 * @param active place of the layer being poured, if one is
 * @param sealed nothing more will be poured: only what is in the cup counts
 */
export function cupBands(layers: readonly CupLayer[], active: number | undefined, sealed: boolean): CupBand[] {
  let floor = 0
  return layers.map((layer, place) => {
    const fromG = floor
    const isActive = !sealed && place === active
    const isPoured = sealed || (layer.pouredG > 0 && !isActive)
    const toG = fromG + (isPoured ? layer.pouredG : Math.max(layer.pouredG, layer.targetG))
    floor = toG
    return {
      fromG,
      filledG: fromG + layer.pouredG,
      toG,
      indexG: isActive ? fromG + layer.targetG : toG,
      state: isActive ? 'active' : isPoured ? 'poured' : 'to-come',
    }
  })
}

/**
 * Moves labels apart so that none touches the next. Given and returned in the order of `wanted`.
 *
 * @param wanted heights the labels would like, px from the top
 * @param gap least distance between two labels, px
 * @param least highest place a label may stand, px from the top
 */
export function spreadLabels(wanted: readonly number[], gap: number, least: number): number[] {
  const order = wanted.map((y, place) => ({ y, place })).sort((a, b) => b.y - a.y)
  let below = Number.POSITIVE_INFINITY
  for (const label of order) {
    label.y = Math.min(label.y, below - gap)
    below = label.y
  }
  let above = least
  for (const label of [...order].reverse()) {
    if (label.y >= above) break
    label.y = above
    above += gap
  }
  const spread = new Array<number>(wanted.length).fill(0)
  for (const { y, place } of order) spread[place] = y
  return spread
}
