import { shallowRef, type ShallowRef } from 'vue'
import type { NumberBlock } from '#shared/schemas/number-blocks'
import { freeCodes, takeCode, withBlock, type BenchNumbers } from '#shared/utils/bench-numbers'
import type { useBenchDisk } from '~/composables/useBenchDisk'
import { callApi, toFailure } from '~/utils/api'

/** With so few left the bench asks for more. */
const LOW = 5

interface BenchNumbersUse {
  /** The block on this tablet; null while it holds none. */
  held: ShallowRef<BenchNumbers | null>
  load: () => Promise<void>
  /** Gets the bench's block from the server where few are left. What fails is tried again with the next list. */
  fill: () => Promise<void>
  /** The next code of the block, taken out of it on the disk first; null where the block is used up. */
  take: () => Promise<string | null>
}

/** The numbers that an enrolled bench holds for batches begun without network. */
export function useBenchNumbers(disk: ReturnType<typeof useBenchDisk>): BenchNumbersUse {
  const held = shallowRef<BenchNumbers | null>(null)

  async function write(next: BenchNumbers): Promise<void> {
    await disk.writeNumbers(next)
    held.value = next
  }

  return {
    held,
    load: async () => { held.value = await disk.readNumbers() ?? null },
    fill: async () => {
      if (freeCodes(held.value).length > LOW) return
      try {
        await write(withBlock(held.value, await callApi<NumberBlock>('/api/number-blocks', { method: 'POST' })))
      } catch (error) {
        if (!toFailure(error).passing) throw error
      }
    },
    take: async () => {
      const taken = takeCode(held.value)
      if (taken === null) return null
      await write(taken.numbers)
      return taken.code
    },
  }
}
