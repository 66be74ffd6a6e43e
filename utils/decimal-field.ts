/** What a typed decimal can mean. `value` carries a decimal string with a point, as the API takes it. */
export type DecimalReading =
  | { kind: 'empty' }
  | { kind: 'value', value: string }
  | { kind: 'question', value: string }
  | { kind: 'unreadable' }

const SPACES = /[\s\u00A0\u2009\u202F]+/g
const PLAIN = /^(-?)(\d*)(?:[.,](\d*))?$/
const GROUPED = /^(-?)(\d{1,3}(?:([.,])\d{3})+)(?:([.,])(\d+))?$/

/**
 * Reads a decimal typed by hand. Comma and point both mean the decimal mark when only one of them stands in the text.
 * Two marks (`1.234,5`) could be a thousands mark or a slip of the finger, so they come back as a question, never as a value.
 *
 * @param text what stands in the field, spaces between digits allowed
 */
export function readDecimal(text: string): DecimalReading {
  const typed = text.trim().replace('\u2212', '-').replace(SPACES, '')
  if (typed === '') return { kind: 'empty' }
  const plain = PLAIN.exec(typed)
  if (plain) {
    const [, sign = '', whole = '', fraction] = plain
    if (!whole && !fraction) return { kind: 'unreadable' }
    const digits = whole.replace(/^0+(?=\d)/, '') || '0'
    return { kind: 'value', value: `${sign}${digits}${fraction ? `.${fraction}` : ''}` }
  }
  const grouped = GROUPED.exec(typed)
  if (!grouped) return { kind: 'unreadable' }
  const [, sign = '', whole = '', group, mark, fraction] = grouped
  const mixedGroups = new Set(whole.replace(/\d/g, '')).size > 1
  if (mixedGroups || mark === group) return { kind: 'unreadable' }
  return { kind: 'question', value: `${sign}${whole.replace(/[.,]/g, '')}${fraction ? `.${fraction}` : ''}` }
}
