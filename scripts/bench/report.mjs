import { existsSync, readFileSync, writeFileSync } from 'node:fs'
import { availableParallelism, cpus } from 'node:os'
import { join } from 'node:path'
import { root } from '../lib/paths.mjs'
import { verdict } from './arithmetic.mjs'

/**
 * @typedef {object} Row one figure
 * @property {string} figure what was measured
 * @property {string} target for people
 * @property {string} measured for people, with its unit
 * @property {number} [value] what `least` and `most` are held against; a row without it only informs
 * @property {number} [least]
 * @property {number} [most]
 */

const file = join(root, 'docs', 'bench-report.md')

/** The parts in the order of the report. */
export const PARTS = {
  list: 'Reading the log',
  post: 'Sealing a batch',
  engine: 'The engine',
  screen: 'A key press at the bench',
  size: 'Client code',
  sse: 'Booth screens on the stream',
}

const HEAD = `# The figures

Made by \`npm run bench\`, each as a ratio within one run where a machine's speed would count. A part is measured alone by
\`npm run bench -- ${Object.keys(PARTS).join('|')}\`, and with \`--quick\` in small sizes, only to see that it works. The words
between the marks are written by hand; a run keeps them.
`

/**
 * One line of a table with its verdict.
 * @param {Row} row
 */
export function tableRow({ figure, target, measured, value, least, most }) {
  return `| ${figure} | ${target} | ${measured} | ${value === undefined ? '' : verdict(value, { least, most })} |`
}

const mark = part => `<!-- words on ${part} -->`
const END = '<!-- end of the words -->'

/**
 * The words that stand in a report by hand about a part.
 * @param {string} report
 * @param {string} part
 */
export function wordsOf(report, part) {
  const from = report.indexOf(mark(part))
  if (from < 0) return ''
  const until = report.indexOf(END, from)
  return until < 0 ? '' : report.slice(from + mark(part).length, until).trim()
}

/** A part of a report as it stands, from its heading to the next, or an empty one. */
function standing(report, part) {
  const from = report.indexOf(`## ${PARTS[part]}\n`)
  if (from < 0) return section(part, 'Not measured yet.', [], '')
  const next = report.indexOf('\n## ', from)
  return `${report.slice(from, next < 0 ? undefined : next).trim()}\n`
}

function section(part, note, rows, words) {
  const table = rows.length === 0 ? [] : ['', '| figure | target | measured | |', '| --- | --- | --- | --- |', ...rows.map(tableRow)]
  return [`## ${PARTS[part]}`, '', note, ...table, '', mark(part), ...(words ? [words] : []), END, ''].join('\n')
}

/**
 * The report with the parts that were measured anew; other parts and all words by hand stay.
 * @param {string} report as it was
 * @param {Partial<Record<string, Row[]>>} measured
 * @param {string} note where and when it was measured
 */
export function mergeReport(report, measured, note) {
  const parts = Object.keys(PARTS).map(part => measured[part]
    ? section(part, note, measured[part], wordsOf(report, part))
    : standing(report, part))
  return [HEAD, ...parts].join('\n')
}

/**
 * Writes the parts that were measured into docs/bench-report.md.
 * @param {Partial<Record<string, Row[]>>} measured
 * @param {{ quick: boolean }} options
 */
export function writeReport(measured, { quick }) {
  const report = existsSync(file) ? readFileSync(file, 'utf8') : ''
  const day = new Date().toISOString().slice(0, 10)
  const model = cpus()[0]?.model.trim() || 'unnamed processor'
  const note = `${day}, Node ${process.versions.node}, ${availableParallelism()} cores (${model})${quick ? ', **small sizes only**' : ''}.`
  writeFileSync(file, mergeReport(report, measured, note))
}
