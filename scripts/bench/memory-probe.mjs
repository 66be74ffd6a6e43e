import { createServer } from 'node:http'
import { setFlagsFromString } from 'node:v8'
import { runInNewContext } from 'node:vm'

/** Loaded before a server that is measured: answers on a socket of its own what the process holds after a collection. */
if (process.env.BENCH_PROBE && process.argv[1]?.endsWith('index.mjs')) {
  setFlagsFromString('--expose-gc')
  const collect = runInNewContext('gc')
  const probe = createServer((asked, answer) => {
    collect()
    collect()
    const { rss, heapUsed, external } = process.memoryUsage()
    answer.end(JSON.stringify({ rss, heapUsed, external }))
  })
  probe.listen(process.env.BENCH_PROBE)
  probe.unref()
}
