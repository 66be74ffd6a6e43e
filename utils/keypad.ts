export type KeypadKey = '0' | '1' | '2' | '3' | '4' | '5' | '6' | '7' | '8' | '9' | '.' | 'delete'

export interface KeypadRules {
  /** The number just opened: the first digit replaces it instead of being added to it. */
  fresh: boolean
  maxLength: number
  maxDecimals: number
}

/** The text after one key. Keys that would break the rules leave it as it stands. */
export function pressKey(text: string, key: KeypadKey, rules: KeypadRules): string {
  if (key === 'delete') return rules.fresh ? '' : text.slice(0, -1)
  const before = rules.fresh ? '' : text
  if (key === '.') return before.includes('.') || rules.maxDecimals === 0 ? before : `${before || '0'}.`
  const next = before === '0' ? key : before + key
  const decimals = next.split('.')[1]?.length ?? 0
  return next.length > rules.maxLength || decimals > rules.maxDecimals ? before : next
}
