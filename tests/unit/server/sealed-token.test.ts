import { describe, expect, it } from 'vitest'
import { tokenOf } from '../../../server/utils/sealed-token'

describe('the token of a sealed cookie', () => {
  it('is unsealed once and remembered for that very cookie', async () => {
    let opened = 0
    const open = (token: string) => () => {
      opened++
      return Promise.resolve(token)
    }
    expect(await tokenOf('sealed-a', open('a'))).toBe('a')
    expect(await tokenOf('sealed-a', open('never asked'))).toBe('a')
    expect(await tokenOf('sealed-b', open('b'))).toBe('b')
    expect(opened).toBe(2)
  })

  it('is asked for anew where the seal did not open', async () => {
    expect(await tokenOf('sealed-c', () => Promise.resolve(undefined))).toBeUndefined()
    expect(await tokenOf('sealed-c', () => Promise.resolve('c'))).toBe('c')
  })

  it('does not remember without end', async () => {
    for (let n = 0; n <= 2_000; n++) await tokenOf(`many-${n}`, () => Promise.resolve(`token-${n}`))
    let again = false
    await tokenOf('many-0', () => {
      again = true
      return Promise.resolve('token-0')
    })
    expect(again).toBe(true)
  })
})
