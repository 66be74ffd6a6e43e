import { Scrypt } from '@adonisjs/hash/drivers/scrypt'
import { describe, expect, it } from 'vitest'
import { hashSecret, needsRehash, verifyNobody, verifySecret } from '../../../server/utils/password'

const password = 'a pot has a life of its own'

describe('passwords', () => {
  it('are kept as scrypt with the agreed costs and a salt of their own', async () => {
    const [first, second] = await Promise.all([hashSecret(password), hashSecret(password)])
    expect(first).toMatch(/^\$scrypt\$n=32768,r=8,p=3\$[^$]{20,}\$[^$]{80,}$/)
    expect(second).not.toBe(first)
    expect(first.length).toBeLessThanOrEqual(255)
    expect(first).not.toContain(password)
  })

  it('fit their own hash and no other word does', async () => {
    const hash = await hashSecret(password)
    expect(await verifySecret(hash, password)).toBe(true)
    expect(await verifySecret(hash, `${password} `)).toBe(false)
    expect(await verifySecret(hash, '')).toBe(false)
  })

  it.each(['', 'plain', '$scrypt$n=1$x$y', '$argon2id$v=19$m=65536,t=3,p=4$c2FsdA$aGFzaA'])(
    'never fit what is no hash of ours: %j',
    async (hash) => expect(await verifySecret(hash, hash)).toBe(false),
  )

  it('are asked to be hashed anew when the costs have risen', async () => {
    const cheap = await new Scrypt({ cost: 16384, blockSize: 8, parallelization: 1 }).make(password)
    expect(needsRehash(cheap)).toBe(true)
    expect(await verifySecret(cheap, password)).toBe(true)
    expect(needsRehash(await hashSecret(password))).toBe(false)
    expect(needsRehash('plain')).toBe(true)
  })

  it('of nobody are refused in about the time of a real refusal', async () => {
    const hash = await hashSecret(password)
    await verifyNobody(password)
    const spent = async (check: () => Promise<boolean>) => {
      const start = process.cpuUsage()
      for (let i = 0; i < 4; i++) expect(await check()).toBe(false)
      const { user, system } = process.cpuUsage(start)
      return user + system
    }
    const known = await spent(() => verifySecret(hash, 'wrong'))
    const unknown = await spent(() => verifyNobody('wrong'))
    expect(unknown / known).toBeGreaterThan(0.5)
    expect(unknown / known).toBeLessThan(2)
  })
})
