import { describe, expect, it } from 'vitest'
import { brimFor } from '~/utils/bench-cup'

describe('the brim of a drawn cup', () => {
  it.each([['0', '100'], ['84.7', '100'], ['84.8', '250'], ['423.7', '500'], ['3700', '5000'], ['50847.4', '60000']])('for %s g is at %s g', (pouredG, brim) => {
    expect(brimFor(pouredG)).toBe(brim)
  })

  it('is the amount itself where no cup is large enough', () => expect(brimFor('60000.1')).toBe('60000.1'))
})
