import { calculateBatch } from '#shared/engine/batch'

/**
 * Times the engine and prints what it measured. CPU time counts, so that a busy machine does not count against it.
 * Argument: how many batches are reckoned in all.
 */
const batches = Number(process.argv[2])
const most = 8
const rounds = 7

const batchOf = (components: number, areaM2: string) => calculateBatch({
  mix: { basis: 'weight', components: Array.from({ length: components }, (_, index) => ({ name: `c${index}`, parts: String(100 - index), densityGPerMl: '1.1' })) },
  areaM2, filmWeightGsm: '120', filmWeightIs: 'deposited', coats: 1, transferEfficiencyPct: '60', reserveG: '60', scaleDivisionG: '0.1',
})

function cpuMs(work: () => void): number {
  const before = process.cpuUsage()
  work()
  return process.cpuUsage(before).user / 1000
}

/** Each from its own area: nothing could be remembered. @returns milliseconds for one */
function perBatch(components: number, count: number): number {
  const totals = new Set<string>()
  const spent = cpuMs(() => {
    for (let place = 1; place <= count; place += 1) totals.add(batchOf(components, String(place)).exactTotalG)
  })
  if (totals.size !== count) throw new Error('batches of different areas have the same total')
  return spent / count
}

perBatch(most, Math.ceil(batches / 10))
const each = Math.ceil(batches / 20)
const byComponents = Array.from({ length: most }, (_, place) => ({ components: place + 1, ms: [] as number[] }))
for (let round = 0; round < rounds; round += 1) {
  for (const one of byComponents) one.ms.push(perBatch(one.components, each))
}
process.stdout.write(`${JSON.stringify({ batches, msPerBatch: perBatch(3, batches), byComponents })}\n`)
