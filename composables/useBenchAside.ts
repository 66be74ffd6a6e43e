import { shallowRef, type ShallowRef } from 'vue'
import type { BenchAside } from '#shared/utils/bench-refusal'
import type { useBenchDisk } from '~/composables/useBenchDisk'

interface BenchAsideUse {
  /** Batches laid aside on this tablet, the latest first. */
  kept: ShallowRef<readonly BenchAside[]>
  load: () => Promise<void>
  put: (aside: BenchAside) => Promise<void>
  drop: (id: string) => Promise<void>
}

/** Batches that the server did not take from here, with grams in their cups. They stay until somebody deals with them. */
export function useBenchAside(disk: ReturnType<typeof useBenchDisk>): BenchAsideUse {
  const kept = shallowRef<readonly BenchAside[]>([])

  async function load(): Promise<void> {
    kept.value = (await disk.readAside()).sort((a, b) => b.at - a.at)
  }

  return {
    kept,
    load,
    put: async (aside) => {
      await disk.writeAside(aside)
      await load()
    },
    drop: async (id) => {
      await disk.dropAside(id)
      await load()
    },
  }
}
