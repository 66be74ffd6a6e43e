import { describe, expect, it } from 'vitest'
import { D } from '#shared/engine/decimal'
import { calculateBatch } from '#shared/engine/batch'
import published from '../../checks/published.json'
import { answers } from './published-answers'

type Value = string | number | boolean | readonly (string | number)[]

interface Expected {
  value: Value
  published?: Value
}

interface Entry {
  id: string
  formula: string
  inputs: Record<string, { value: Value }>
  expected: Record<string, Expected>
  tolerance: { abs?: number, rel?: number, exact?: boolean }
  source: string
  certainty: string
}

const entries = published as unknown as Entry[]

/** Entries that no function of the engine answers, and why. */
const outside: Record<string, string> = {
  'MIX-14': 'formulating by equivalent weights is the maker\'s work; a shop mixes to the sheet\'s ratio',
  'DEW-16': 'a chart\'s margin of 5 °F; the engine warns under 3 K, which is 5.4 °F',
}

/** Where the print is further from the arithmetic than its own rounding, and by how much at most. */
const printDiffers: Record<string, { allowed: string, because: string }> = {
  ...Object.fromEntries(['01', '05', '08', '10', '13', '17'].map(n => [`VIS-${n}`, {
    allowed: '0.045', because: 'the printed pair is a standard oil and its drain time; the equation agrees within 4.5 %',
  }])),
  'DEW-08': { allowed: '0.02', because: 'the chart truncates to whole degrees' },
  'POT-07': { allowed: '0.2', because: 'the print is "about"; a product\'s own table wins over the rule' },
}

function close(actual: string, expected: number, { abs, rel }: Entry['tolerance']): boolean {
  const gap = new D(actual).minus(expected).abs()
  if (rel !== undefined) return gap.lte(new D(expected).abs().times(rel))
  return gap.lte(abs ?? 0)
}

function withinPrint(id: string, actual: string, print: number): boolean {
  const gap = new D(actual).minus(print).abs()
  const differs = printDiffers[id]
  if (differs !== undefined) return gap.lte(new D(print).abs().times(differs.allowed))
  const halfStep = new D(10).pow(-new D(print).decimalPlaces()).div(2)
  return gap.lte(halfStep)
}

function answerOf(entry: Entry) {
  const valueOf = (name: string): Value => {
    const input = entry.inputs[name]
    if (input === undefined) throw new Error(`${entry.id} has no input ${name}`)
    return input.value
  }
  const list = (name: string): string[] => {
    const value = valueOf(name)
    return Array.isArray(value) ? value.map(String) : [String(value)]
  }
  return answers[entry.id]?.(name => String(valueOf(name)), list) ?? {}
}

describe('published check values', () => {
  it('leaves no entry out', () => {
    const answered = Object.keys(answers)
    expect(entries).toHaveLength(95)
    expect(entries.map(({ id }) => id).sort()).toEqual([...answered, ...Object.keys(outside)].sort())
  })

  it.each(entries.filter(({ id }) => !(id in outside)))('$id: $formula ($certainty; $source)', (entry) => {
    const answer = answerOf(entry)
    expect(Object.keys(answer).sort()).toEqual(Object.keys(entry.expected).sort())
    for (const [name, { value, published: print }] of Object.entries(entry.expected)) {
      const actual = answer[name]
      if (typeof value === 'number' && typeof actual === 'string') {
        expect(close(actual, value, entry.tolerance), `${name}: ${actual} against ${value}`).toBe(true)
        if (typeof print === 'number') {
          expect(withinPrint(entry.id, actual, print), `${name}: ${actual} against print ${print}`).toBe(true)
        }
      }
      else {
        expect(actual).toEqual(value)
      }
    }
  })

  it('knows where a print is not the arithmetic: each exception is needed', () => {
    for (const id of Object.keys(printDiffers)) {
      const entry = entries.find(one => one.id === id)!
      const answer = answerOf(entry)
      const outsidePrint = Object.entries(entry.expected).some(([name, { published: print }]) =>
        typeof print === 'number'
        && new D(answer[name] as string).minus(print).abs().gt(new D(10).pow(-new D(print).decimalPlaces()).div(2)))
      expect(outsidePrint, id).toBe(true)
    }
  })

  it('MIX-20 does not hold for the same figures read as a weight ratio', () => {
    const components = ['4', '1', '1'].map((parts, index) => ({ name: String(index), parts }))
    const { components: wrong } = calculateBatch({ mix: { basis: 'weight', components }, totalG: '1000', scaleDivisionG: '0.1' })
    expect(wrong.map(({ exactG }) => exactG)).toEqual(['666.666666666667', '166.666666666667', '166.666666666667'])
    const entry = entries.find(({ id }) => id === 'MIX-20')!
    expect(close(wrong[0]!.exactG, entry.expected.base!.value as number, entry.tolerance)).toBe(false)
  })
})
