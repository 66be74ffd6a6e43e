import { minorStep, niceStep, stepDecimals, ticksBetween, type Tick } from './draw-scale'

export interface ToleranceRange {
  min: number
  max: number
  ticks: Tick[]
  /** Digits after the point on the tick labels. */
  decimals: number
}

/**
 * The stretch of grams a tolerance ruler shows. Far below the band it shows the whole pour, near it the last stretch,
 * inside the band 1.5 × the band, and above it enough to see by how much.
 *
 * @param lowG lower edge of the band
 * @param highG upper edge of the band
 * @param readingG what the scale reads
 * @param widthPx room for the scale
 */
export function toleranceRange(lowG: number, highG: number, readingG: number, widthPx: number): ToleranceRange {
  const band = Math.max(highG - lowG, 1e-6)
  const [min, max] = stretch(lowG, highG, readingG, band)
  const major = niceStep(max - min, widthPx / 56)
  const minor = minorStep(major, widthPx / (max - min), 5)
  return { min, max, ticks: ticksBetween(min, max, minor, major), decimals: stepDecimals(major) }
}

function stretch(lowG: number, highG: number, readingG: number, band: number): [number, number] {
  if (readingG > highG) return [lowG - 0.4 * band, Math.max(highG + 0.8 * band, readingG + 0.4 * band)]
  if (readingG >= lowG) return [lowG === 0 ? 0 : lowG - 0.25 * band, highG + 0.25 * band]
  if (readingG >= lowG - 2 * band) return [Math.max(0, lowG - 2 * band), highG + 0.5 * band]
  return [0, highG + Math.max(0.06 * highG, 0.5 * band)]
}
