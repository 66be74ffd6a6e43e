import { command, Refused, withConnections } from './connections'
import { demoWeeks, makeDemo } from './demo/make'

/** Fills an empty database with the demo shop. */
await command(() => withConnections(async (connections) => {
  const started = process.hrtime.bigint()
  const outcome = await makeDemo(connections, { weeks: demoWeeks, say: (line) => console.log(line) })
  if (!outcome.made) {
    if (outcome.why === 'foreign') throw new Refused('This database already has people in it: the demo shop is only put into an empty one.')
    console.log('The demo shop is there already.')
    return
  }
  const { batches, jobs } = outcome.report
  const seconds = (process.hrtime.bigint() - started) / 1_000_000_000n
  console.log(`The demo shop is ready: ${batches} batches of ${jobs} jobs in ${seconds} s.`)
}))
