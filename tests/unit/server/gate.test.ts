import { describe, expect, it } from 'vitest'
import { Gate } from '../../../server/utils/gate'

/** Work that runs until it is told to end. */
function piece(log: string[], name: string) {
  let end: (fault?: Error) => void = () => undefined
  const done = new Promise<string>((resolve, reject) => {
    end = (fault) => (fault ? reject(fault) : resolve(name))
  })
  return { work: () => (log.push(name), done), end: (fault?: Error) => end(fault) }
}

describe('gate', () => {
  it('turns away who comes when as many wait as may', async () => {
    const gate = new Gate(1, { most: 1, full: () => new Error('full') })
    const log: string[] = []
    const [a, b, c] = ['a', 'b', 'c'].map((name) => piece(log, name))
    const first = gate.run(a!.work)
    const second = gate.run(b!.work)
    await expect(gate.run(c!.work)).rejects.toThrow('full')
    a?.end()
    b?.end()
    expect(await Promise.all([first, second])).toEqual(['a', 'b'])
    expect(log).toEqual(['a', 'b'])
  })

  it('lets two through and keeps the third and fourth waiting in their order', async () => {
    const gate = new Gate(2)
    const log: string[] = []
    const pieces = ['a', 'b', 'c', 'd'].map((name) => piece(log, name))
    const runs = pieces.map(({ work }) => gate.run(work))
    await Promise.resolve()
    expect(log).toEqual(['a', 'b'])
    pieces[1]?.end()
    expect(await runs[1]).toBe('b')
    expect(log).toEqual(['a', 'b', 'c'])
    pieces[0]?.end()
    await runs[0]
    expect(log).toEqual(['a', 'b', 'c', 'd'])
    pieces[2]?.end()
    pieces[3]?.end()
    expect(await Promise.all(runs)).toEqual(['a', 'b', 'c', 'd'])
  })

  it('makes room again after a failure and hands the failure on', async () => {
    const gate = new Gate(1)
    const log: string[] = []
    const first = piece(log, 'first')
    const second = piece(log, 'second')
    const failing = gate.run(first.work)
    const following = gate.run(second.work)
    first.end(new Error('no memory'))
    await expect(failing).rejects.toThrow('no memory')
    second.end()
    expect(await following).toBe('second')
  })

  it.each([0, -1, 1.5, Number.NaN])('refuses a width of %s', (width) => {
    expect(() => new Gate(width)).toThrow(RangeError)
  })
})
