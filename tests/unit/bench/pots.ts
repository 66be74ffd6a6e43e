import { reckon } from '#shared/utils/bench-reckon'
import { baseStirred, nextStep, startRun, takeReading, type BenchRun } from '#shared/utils/bench-run'
import { id, setup, snapshot, tools } from './shop'

export const atMs = Date.parse('2026-11-17T08:00:00.000Z')
export const kit = tools()

/** A pot of the shop's two-pack mix that waits for its first gram. */
export function begin(): BenchRun {
  const pot = reckon(setup({ areaM2: '6.7' }), snapshot()).pots[0]
  if (pot === undefined) throw new Error('no pot')
  return baseStirred(startRun({
    id: id(90), planId: id(91), pot, potCount: 1, tools: kit, jobStepId: null, purpose: 'sample', mixedByUserId: id(92), lots: [id(21), id(24), id(25)],
  }))
}

/** Types a steady weight. */
export const typed = (run: BenchRun, grams: string, ms = 0): BenchRun =>
  takeReading(run, { grams, steady: true, at: atMs + ms }, 'typed', { at: atMs + ms, deviceAt: atMs + ms }, kit)

/** Types a steady weight and goes on. */
export const pour = (run: BenchRun, grams: string, ms = 0): BenchRun => nextStep(typed(run, grams, ms), atMs + ms)
