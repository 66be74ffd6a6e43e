import { describe, expect, it } from 'vitest'
import { restartBudget } from '../../../scripts/lib/supervise.mjs'

describe('restartBudget', () => {
  it('allows five restarts within a minute and stops at the sixth', () => {
    const spend = restartBudget('The server')
    for (let second = 0; second < 5; second++) spend(second * 1000)
    expect(() => spend(59_000)).toThrow('The server ended 6 times within a minute; it is not started again.')
  })

  it('forgets what is more than a minute old', () => {
    const spend = restartBudget('The server')
    for (let restart = 0; restart < 20; restart++) expect(() => spend(restart * 13_000)).not.toThrow()
  })
})
