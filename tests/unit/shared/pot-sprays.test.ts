import { describe, expect, it } from 'vitest'
import { gunSprays, latestShot, sprayedSpan } from '#shared/utils/pot-sprays'

const shot = (kind: 'first-spray' | 'last-spray' | 'gun-flushed', gunId: string | null, at: number) => ({ kind, gunId, gunName: gunId, at })

describe('a pot that feeds two guns', () => {
  const both = [shot('first-spray', 'a', 10), shot('first-spray', 'b', 20), shot('last-spray', 'a', 40)]

  it('keeps what each did', () => {
    expect(gunSprays(both)).toEqual([
      { gunId: 'a', gunName: 'a', firstAt: 10, lastAt: 40, flushedAt: null },
      { gunId: 'b', gunName: 'b', firstAt: 20, lastAt: null, flushedAt: null },
    ])
  })

  it('has no last spray while one of them still sprays', () => {
    expect(sprayedSpan(gunSprays(both))).toMatchObject({ firstAt: 10, lastAt: null, unended: [{ gunId: 'b' }] })
  })

  it('runs from the first of the first to the last of the last', () => {
    const ended = [...both, shot('last-spray', 'b', 30), shot('gun-flushed', 'a', 45)]
    expect(sprayedSpan(gunSprays(ended))).toEqual({ firstAt: 10, lastAt: 40, unended: [] })
    expect(gunSprays(ended)[0]).toMatchObject({ flushedAt: 45 })
  })
})

describe('a pot of which little was noted', () => {
  it('has a last spray also where nobody tapped the first', () => {
    expect(sprayedSpan(gunSprays([shot('last-spray', null, 30)]))).toEqual({ firstAt: null, lastAt: 30, unended: [] })
  })

  it('was not sprayed by a gun that was only flushed', () => {
    expect(sprayedSpan(gunSprays([shot('gun-flushed', 'a', 30)]))).toEqual({ firstAt: null, lastAt: null, unended: [] })
  })
})

describe('the latest shot from a pot whose guns were not ended', () => {
  it('is when each of them was loaded from another pot, and the present while one may still spray', () => {
    expect(latestShot([], 100)).toBe(100)
    expect(latestShot([{ movedOnAt: null }], 100)).toBe(100)
    expect(latestShot([{ movedOnAt: 40 }, { movedOnAt: 60 }], 100)).toBe(60)
    expect(latestShot([{ movedOnAt: 40 }, { movedOnAt: null }], 100)).toBe(100)
    expect(latestShot([{ movedOnAt: 140 }], 100)).toBe(100)
  })
})
