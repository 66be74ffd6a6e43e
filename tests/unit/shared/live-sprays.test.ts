import { describe, expect, it } from 'vitest'
import type { PotGun } from '#shared/schemas/live'
import { toBeEnded, toBeFlushed } from '#shared/utils/live-sprays'

const at = '2026-11-17T09:00:00.000Z'
const gun = (gunId: string, more: Partial<PotGun> = {}): PotGun => ({ gunId, gunName: gunId, firstSprayAt: null, lastSprayAt: null, flushedAt: null, ...more })
const pot = (id: string, jobId: string | null, guns: PotGun[]) => ({ id, jobId, stage: 'sealed' as const, guns })

describe('a last spray that nobody tapped', () => {
  const open = pot('a', 'job', [gun('one', { firstSprayAt: at })])

  it('is asked for when the next pot of the job is sprayed', () => {
    expect(toBeEnded(pot('b', 'job', []), 'two', [open])).toBe(open)
  })

  it('is asked for when its gun is loaded from another pot', () => {
    expect(toBeEnded(pot('b', null, []), 'one', [open])).toBe(open)
  })

  it('is not asked for by a pot that has to do with neither, nor by itself', () => {
    expect(toBeEnded(pot('b', 'other job', []), 'two', [open])).toBeUndefined()
    expect(toBeEnded(open, 'one', [open])).toBeUndefined()
    expect(toBeEnded(pot('b', 'job', []), 'one', [pot('a', 'job', [gun('one', { firstSprayAt: at, lastSprayAt: at })])])).toBeUndefined()
  })
})

describe('guns to be flushed', () => {
  it('are those that the pot was loaded into', () => {
    const guns = [gun('one', { firstSprayAt: at }), gun('two', { firstSprayAt: at, flushedAt: at })]
    expect(toBeFlushed({ guns, gunId: 'three', gunName: 'three' })).toEqual([guns[0]])
  })

  it('are the planned one while nobody noted any, until it was flushed', () => {
    expect(toBeFlushed({ guns: [], gunId: 'three', gunName: 'Gun 3' })).toEqual([{ gunId: 'three', gunName: 'Gun 3' }])
    expect(toBeFlushed({ guns: [gun('three', { flushedAt: at })], gunId: 'three', gunName: 'Gun 3' })).toEqual([])
  })
})
