import { mustRunFile } from '../lib/typescript.mjs'
import { figure, line } from './arithmetic.mjs'

/**
 * The engine alone: ten thousand batches, and how its cost grows with the components.
 * @param {import('./place.mjs').Place} place
 * @returns {Promise<import('./report.mjs').Row[]>}
 */
export async function measureEngine({ env, quick }) {
  const output = await mustRunFile('The engine could not be timed:', 'scripts/bench/engine.ts', env, { more: [quick ? '2000' : '10000'], capture: true })
  const { batches, msPerBatch, byComponents } = JSON.parse(output.trimEnd().split('\n').at(-1))
  // The quickest round is the one that nothing else disturbed.
  const points = byComponents.map(({ components, ms }) => [components, Math.min(...ms)])
  const { slope, intercept, fit } = line(points)
  const [low, high] = [line(points.slice(0, 4)).slope, line(points.slice(4)).slope]
  return [
    {
      figure: `${batches} batches of three components, each from its own area`, target: 'measured',
      measured: `${figure(msPerBatch * batches / 1000)} s of processor time, ${figure(msPerBatch * 1000)} µs each`,
    },
    {
      figure: 'cost over 1 to 8 components on a straight line', target: '≥ 0.98 of the spread', value: fit, least: 0.98,
      measured: `${fit.toFixed(4)} (${figure(intercept * 1000)} µs and ${figure(slope * 1000)} µs a component)`,
    },
    {
      figure: 'a component more costs with 5 to 8 components what it costs with 1 to 4', target: '≤ 1.5 ×', value: high / low, most: 1.5,
      measured: `${figure(high / low)} × (${figure(high * 1000)} to ${figure(low * 1000)} µs)`,
    },
  ]
}
