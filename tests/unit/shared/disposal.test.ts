import { describe, expect, it } from 'vitest'
import { disposalFor } from '#shared/utils/disposal'

describe('where a leftover goes', () => {
  it.each([
    ['polyurethane', true, 'open-metal-can'],
    ['waterborne-2k', true, 'open-metal-can'],
    ['nitrocellulose', false, 'nitro-metal-can'],
    ['waterborne-1k', false, 'waterborne-waste'],
    ['oil', false, 'solvent-waste'],
  ])('%s, reacting %s: %s', (chemistry, reacting, key) => {
    expect(disposalFor(chemistry, reacting).key).toBe(key)
  })

  it('never seals a leftover that reacts', () => {
    expect(disposalFor('polyester', true).words).toMatch(/open.*never sealed/)
  })
})
