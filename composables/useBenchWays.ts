import { withoutNumber } from '#shared/utils/bench-refusal'
import { toldOfLot, withWord, type TinWord } from '#shared/utils/bench-tin'
import { useBenchStore } from '~/stores/bench'
import { useOutboxStore } from '~/stores/outbox'

interface BenchWays {
  /** What stood in the way is done: the batch at hand is sent again. */
  sendAgain: () => Promise<void>
  /** The number that this bench had chosen is somebody else's: the server gives another. */
  renumber: () => Promise<void>
  /** Somebody read that a lot in the cup may no longer be poured, and goes on, with a foreman's word or without. */
  goOnWithLot: (lotId: string, word?: TinWord) => Promise<void>
}

/** Ways on with a batch that the server refused as it was. */
export function useBenchWays(): BenchWays {
  const bench = useBenchStore()
  const outbox = useOutboxStore()

  return {
    sendAgain: async () => {
      bench.refusal = null
      if (bench.run !== null) await outbox.retry(bench.run.id)
    },
    renumber: async () => {
      bench.refusal = null
      if (bench.run !== null) await bench.change(withoutNumber(bench.run), 'now')
    },
    goOnWithLot: async (lotId, word = { approvals: [], faults: [] }) => {
      bench.refusal = null
      if (bench.run !== null) await bench.change(toldOfLot(withWord(bench.run, lotId, word), lotId), 'now')
    },
  }
}
