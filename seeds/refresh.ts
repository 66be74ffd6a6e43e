import { databaseClock } from '../server/utils/clock'
import type { Context } from '../server/utils/context'
import { newId } from '../server/utils/ids'
import { command, withConnections, type Connections } from './connections'
import { demoWeeks, makeDemo } from './demo/make'
import { readDemoState } from './demo/state'
import { openToday } from './demo/today'

/** Opens the demo shop for the day; one that was never finished is made anew first. A shop of one's own is left alone. */
async function refresh(connections: Connections): Promise<void> {
  const state = await readDemoState(connections.admin)
  if (state === 'unfinished') await makeDemo(connections, { weeks: demoWeeks, say: (line) => console.log(line) })
  else if (state !== 'done') return
  const ctx: Context = {
    db: connections.app, clock: databaseClock, principal: { kind: 'system', user: null, device: null }, requestId: newId(), wake: () => undefined,
  }
  const { closed, pots } = await openToday(ctx)
  if (closed > 0) console.log(`Emptied ${closed === 1 ? 'a forgotten pot' : `${closed} forgotten pots`}.`)
  if (pots > 0) console.log(`Mixed ${pots} pots, so that something runs.`)
}

await command(() => withConnections(refresh))
