/** The arithmetic of the figures: medians, percentiles, ratios, a straight line, and whether a figure is met. */

/**
 * The value under which a share of the values lies, by the nearest rank.
 * @param {readonly number[]} values at least one
 * @param {number} share above 0, up to 1
 * @returns {number}
 */
export function percentile(values, share) {
  if (values.length === 0) throw new RangeError('a percentile needs a value')
  if (!(share > 0 && share <= 1)) throw new RangeError('a share lies above 0 and up to 1')
  const sorted = [...values].sort((a, b) => a - b)
  return sorted[Math.ceil(share * sorted.length) - 1]
}

/**
 * The middle value; the mean of the two in the middle of an even number.
 * @param {readonly number[]} values at least one
 * @returns {number}
 */
export function median(values) {
  if (values.length === 0) throw new RangeError('a median needs a value')
  const sorted = [...values].sort((a, b) => a - b)
  const half = sorted.length / 2
  return Number.isInteger(half) ? (sorted[half - 1] + sorted[half]) / 2 : sorted[Math.floor(half)]
}

/**
 * The median of the ratios of what was measured side by side, so that a machine that slows down slows both.
 * @param {readonly (readonly [number, number])[]} pairs
 * @returns {number} first ÷ second
 */
export function medianRatio(pairs) {
  return median(pairs.map(([one, other]) => {
    if (!(other > 0)) throw new RangeError('a ratio needs something to divide by')
    return one / other
  }))
}

/**
 * The straight line of least squares.
 * @param {readonly (readonly [number, number])[]} points x and y; at least two different x
 * @returns {{ slope: number, intercept: number, fit: number }} `fit` is the share of the spread that the line explains
 */
export function line(points) {
  const mean = place => points.reduce((sum, point) => sum + point[place], 0) / points.length
  const [mx, my] = [mean(0), mean(1)]
  const across = points.reduce((sum, [x]) => sum + (x - mx) ** 2, 0)
  if (!(across > 0)) throw new RangeError('a line needs two different places')
  const slope = points.reduce((sum, [x, y]) => sum + (x - mx) * (y - my), 0) / across
  const intercept = my - slope * mx
  const spread = points.reduce((sum, [, y]) => sum + (y - my) ** 2, 0)
  const left = points.reduce((sum, [x, y]) => sum + (y - intercept - slope * x) ** 2, 0)
  return { slope, intercept, fit: spread === 0 ? 1 : 1 - left / spread }
}

/**
 * Whether a figure is met.
 * @param {number} measured
 * @param {{ least?: number, most?: number }} target
 * @returns {'met' | 'not met'} a figure that could not be measured is not met
 */
export function verdict(measured, { least = -Infinity, most = Infinity }) {
  return measured >= least && measured <= most ? 'met' : 'not met'
}

/** A figure for the eye: three digits that count, no more. */
export function figure(value) {
  if (!Number.isFinite(value)) return '?'
  const size = Math.abs(value)
  return size >= 100 ? value.toFixed(0) : size >= 10 ? value.toFixed(1) : value.toFixed(2)
}
