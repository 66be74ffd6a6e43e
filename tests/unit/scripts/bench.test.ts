import { describe, expect, it } from 'vitest'
import { figure, line, median, medianRatio, percentile, verdict } from '../../../scripts/bench/arithmetic.mjs'
import { mergeReport, tableRow, wordsOf } from '../../../scripts/bench/report.mjs'

describe('the arithmetic of the figures', () => {
  it('takes the middle value, and the mean of two in the middle', () => {
    expect(median([9, 1, 5])).toBe(5)
    expect(median([9, 1, 5, 7])).toBe(6)
    expect(() => median([])).toThrow(RangeError)
  })

  it('takes the value of the nearest rank and sorts by number', () => {
    const values = Array.from({ length: 100 }, (_, place) => 100 - place)
    expect([percentile(values, 0.5), percentile(values, 0.95), percentile(values, 0.99), percentile(values, 1)]).toEqual([50, 95, 99, 100])
    expect(percentile([10, 9, 100], 0.99)).toBe(100)
    expect(() => percentile([], 0.5)).toThrow(RangeError)
    expect(() => percentile([1], 0)).toThrow(RangeError)
  })

  it('compares what was measured side by side', () => {
    expect(medianRatio([[8, 10], [1, 10], [9, 10]])).toBe(0.8)
    expect(() => medianRatio([[1, 0]])).toThrow(RangeError)
  })

  it('finds the line through points, and how well it fits', () => {
    const straight = line([[1, 5], [2, 7], [4, 11]])
    expect(straight.slope).toBeCloseTo(2, 12)
    expect(straight.intercept).toBeCloseTo(3, 12)
    expect(straight.fit).toBeCloseTo(1, 12)
    expect(line([[1, 1], [2, 4], [3, 9], [4, 16], [5, 25], [6, 36], [7, 49], [8, 64]]).fit).toBeLessThan(0.98)
    expect(() => line([[1, 1], [1, 2]])).toThrow(RangeError)
  })

  it('holds a figure against its bounds, and never calls met what was not measured', () => {
    expect([verdict(0.7, { least: 0.7 }), verdict(0.69, { least: 0.7 })]).toEqual(['met', 'not met'])
    expect([verdict(1.8, { most: 1.8 }), verdict(1.81, { most: 1.8 })]).toEqual(['met', 'not met'])
    expect(verdict(NaN, { most: 500 })).toBe('not met')
  })

  it('prints three digits that count', () => {
    expect([figure(0.7249), figure(12.34), figure(1234.5), figure(NaN)]).toEqual(['0.72', '12.3', '1235', '?'])
  })
})

const row = { figure: 'first page', target: '≥ 0.7 ×', measured: '0.65 ×', value: 0.65, least: 0.7 }

describe('the report', () => {
  it('shows a verdict where there is something to hold the figure against', () => {
    expect(tableRow(row)).toBe('| first page | ≥ 0.7 × | 0.65 × | not met |')
    expect(tableRow({ figure: 'bare page', target: 'measured', measured: '64 kB' })).toBe('| bare page | measured | 64 kB |  |')
  })

  it('keeps words by hand and the parts that were not measured anew', () => {
    const first = mergeReport('', { list: [row] }, 'Monday.')
    const words = 'The session is read at each request.'
    const withWords = first.replace('<!-- words on list -->\n', `<!-- words on list -->\n${words}\n`)
    const again = mergeReport(withWords, { list: [{ ...row, value: 0.8, measured: '0.80 ×' }] }, 'Tuesday.')
    expect(again).toContain('Tuesday.\n\n| figure | target | measured | |\n| --- | --- | --- | --- |\n| first page | ≥ 0.7 × | 0.80 × | met |')
    expect(wordsOf(again, 'list')).toBe(words)
    expect(again).not.toContain('Monday.')
    const other = mergeReport(again, { size: [row] }, 'Wednesday.')
    expect(other.split('\n').filter(one => one === 'Tuesday.')).toHaveLength(1)
    expect(other.split('\n').filter(one => one === 'Wednesday.')).toHaveLength(1)
    expect(wordsOf(other, 'list')).toBe(words)
    expect(mergeReport(other, {}, '')).toBe(other)
  })
})
