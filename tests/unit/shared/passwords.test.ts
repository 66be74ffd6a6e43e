import { describe, expect, it } from 'vitest'
import { firstPassword, isGuessable } from '#shared/utils/passwords'

describe('a made-up first password', () => {
  it('is four groups of four that nobody misreads, and passes as a password', () => {
    const made = firstPassword(Uint8Array.from({ length: 16 }, (_, place) => place * 17))
    expect(made).toMatch(/^[a-km-np-z2-9]{4}(-[a-km-np-z2-9]{4}){3}$/)
    expect(isGuessable(made)).toBe(false)
  })

  it('differs with its bytes and needs sixteen of them', () => {
    expect(firstPassword(new Uint8Array(16))).not.toBe(firstPassword(new Uint8Array(16).fill(1)))
    expect(() => firstPassword(new Uint8Array(15))).toThrow(RangeError)
  })
})

describe('what is guessed first', () => {
  it.each(['1234567890', 'Password123', ' qwertyuiop ', 'aaaaaaaaaaaa', 'abababababab', 'let the pot ring'])('"%s" is', (password) => {
    expect(isGuessable(password)).toBe(true)
  })

  it.each(['four plain words here', 'Tr0mbone-lid'])('"%s" is not', (password) => {
    expect(isGuessable(password)).toBe(false)
  })
})
