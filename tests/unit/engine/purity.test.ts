import { readFileSync, readdirSync } from 'node:fs'
import { fileURLToPath } from 'node:url'
import { describe, expect, it } from 'vitest'

const folder = fileURLToPath(new URL('../../../shared/engine/', import.meta.url))
const sources = readdirSync(folder, { recursive: true, encoding: 'utf8' })
  .filter(name => name.endsWith('.ts'))
  .map(name => ({ name, text: readFileSync(`${folder}${name}`, 'utf8') }))

/** What would bring a float, a clock or the outside world into the arithmetic. */
const forbidden: [string, RegExp][] = [
  ['Number(', /\bNumber\s*\(/],
  ['Number.', /\bNumber\./],
  ['parseFloat', /\bparseFloat\b/],
  ['parseInt', /\bparseInt\b/],
  ['toFixed', /\.toFixed\b/],
  ['toPrecision', /\.toPrecision\b/],
  ['toNumber', /\.toNumber\b/],
  ['valueOf', /\.valueOf\b/],
  ['Math.', /\bMath\./],
  ['Date', /\bDate\b/],
  ['performance', /\bperformance\./],
  ['a unary plus on a text', /[=(,?:]\s*\+[a-z(]/i],
  ['console', /\bconsole\./],
  ['process', /\bprocess\./],
  ['fetch', /\bfetch\s*\(/],
  ['a random number', /random/i],
  ['any', /:\s*any\b|<any>|as any\b/],
  ['await', /\bawait\b/],
]

function withoutComments(text: string): string {
  return text.replace(/\/\*[\s\S]*?\*\//g, '').replace(/(^|\s)\/\/.*$/gm, '')
}

describe('the engine\'s sources', () => {
  it('are all here', () => {
    expect(sources.length).toBeGreaterThanOrEqual(25)
  })

  it.each(sources)('$name imports decimal.js and its neighbours only', ({ text }) => {
    const imported = [...text.matchAll(/from\s+'([^']+)'|import\s+'([^']+)'|import\(\s*'([^']+)'/g)].map(match => match[1] ?? match[2] ?? match[3])
    for (const path of imported) expect(path).toMatch(/^(decimal\.js|\.\/[a-z-]+)$/)
  })

  it.each(sources)('$name carries no float, clock or outside world', ({ text }) => {
    const code = withoutComments(text)
    expect(forbidden.filter(([, pattern]) => pattern.test(code)).map(([what]) => what)).toEqual([])
  })

  it.each(sources)('$name stays under 300 lines', ({ text }) => {
    expect(text.split('\n').length).toBeLessThanOrEqual(300)
  })

  it('would not pass with one of them in', () => {
    for (const bad of ['const x = Number(text)', 'x.toNumber()', 'Math.max(1, 2)', 'new Date()', 'const n = +text', 'f(+text)']) {
      expect(forbidden.some(([, pattern]) => pattern.test(bad)), bad).toBe(true)
    }
  })
})
