import { describe, expect, it } from 'vitest'
import { pressKey, type KeypadKey, type KeypadRules } from '~/utils/keypad'

const rules = (more: Partial<KeypadRules> = {}): KeypadRules => ({ fresh: false, maxLength: 9, maxDecimals: 3, ...more })

describe('pressKey', () => {
  it.each([
    ['21', '6', {}, '216'], ['0', '5', {}, '5'], ['', '.', {}, '0.'], ['21', '.', {}, '21.'], ['2.1', '.', {}, '2.1'],
    ['2.123', '4', {}, '2.123'], ['123456789', '1', {}, '123456789'], ['12', '.', { maxDecimals: 0 }, '12'],
    ['21.6', 'delete', {}, '21.'], ['', 'delete', {}, ''],
  ] as [string, KeypadKey, Partial<KeypadRules>, string][])('%j and %j make %j', (text, key, more, next) => {
    expect(pressKey(text, key, rules(more))).toBe(next)
  })

  it.each([['21.6', '5', '5'], ['21.6', '.', '0.'], ['21.6', 'delete', '']] as [string, KeypadKey, string][])('replaces %j when %j is the first key', (text, key, next) => {
    expect(pressKey(text, key, rules({ fresh: true }))).toBe(next)
  })
})
