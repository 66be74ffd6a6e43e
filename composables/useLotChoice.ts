import { computed, nextTick, ref, type ComputedRef, type Ref } from 'vue'
import type { BenchLot } from '#shared/schemas/bench'
import { LOT_APPROVALS, lotRefusal, lotRefusalWords } from '#shared/utils/bench-lots'
import type { BenchRun } from '#shared/utils/bench-run'
import { isAllowed, wordsNeeded, type TinWord } from '#shared/utils/bench-tin'
import type { BenchPart } from '#shared/utils/bench-tools'
import { useBenchStore } from '~/stores/bench'

interface LotChoice {
  /** Takes a lot, or asks a foreman for it. Answers why it cannot be used at all; null where it was taken or is asked for. */
  take: (lot: BenchLot) => string | null
  /** A foreman's word is asked for. */
  asking: Ref<boolean>
  action: ComputedRef<typeof LOT_APPROVALS[keyof typeof LOT_APPROVALS]>
  subject: ComputedRef<string>
  title: ComputedRef<string>
  /** Takes a foreman's word for the lot that waits. */
  approved: (id: string) => void
}

/**
 * Choosing a tin of a component: one on offer is taken, one that is blocked or out of date once a foreman has allowed it.
 *
 * @param run the batch that it is for: words given for it count
 * @param use gets the lot and a foreman's words for it
 */
export function useLotChoice(run: () => BenchRun, part: () => BenchPart | undefined, use: (lot: BenchLot, word: TinWord) => Promise<void>): LotChoice {
  const bench = useBenchStore()
  /** The tin that waits for a foreman's word, and the words given so far. */
  const asked = ref<BenchLot | null>(null)
  const given = ref<string[]>([])
  const asking = ref(false)

  const needed = computed(() => {
    const of = part()
    return asked.value && of ? wordsNeeded(run(), asked.value, of, bench.today()) : []
  })
  /** A lot may need two words: one because it is blocked, one because it is out of date. */
  const reason = computed(() => needed.value[given.value.length] ?? needed.value[0] ?? 'out-of-date')

  function take(lot: BenchLot): string | null {
    const of = part()
    const refusal = of === undefined ? 'unknown' : lotRefusal(lot, of.materialId, bench.today(), of.role)
    asked.value = lot
    given.value = []
    if (refusal === null || (of !== undefined && isAllowed(run(), lot, of, bench.today()))) {
      void use(lot, { approvals: [], faults: [] })
      return null
    }
    asking.value = needed.value.length > 0
    return asking.value ? null : lotRefusalWords(refusal, lot, bench.snapshot?.materials ?? [])
  }

  function approved(id: string): void {
    if (asked.value === null) return
    given.value = [...given.value, id]
    if (given.value.length < needed.value.length) void nextTick(() => { asking.value = true })
    else void use(asked.value, { approvals: given.value, faults: needed.value })
  }

  return {
    take,
    asking,
    action: computed(() => LOT_APPROVALS[reason.value]),
    subject: computed(() => `lot:${asked.value?.id ?? ''}`),
    title: computed(() => `Use lot ${asked.value?.lotNumber ?? ''} although it is ${reason.value === 'blocked' ? 'blocked' : 'out of date'}`),
    approved,
  }
}
