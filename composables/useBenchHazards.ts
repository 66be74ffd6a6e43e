import { computed, watch, type ComputedRef } from 'vue'
import { hazardOf, hazardsOf, type BenchHazard } from '#shared/utils/bench-hazards'
import type { BenchPart } from '#shared/utils/bench-tools'
import { useKept } from '~/composables/useKept'
import { useSessionStore } from '~/stores/session'

/** Confirmed hazards of one person: kind and chemistry → epoch ms by the server's clock. */
type Confirmed = Record<string, number>

interface BenchHazardUse {
  hazards: ComputedRef<BenchHazard[]>
  confirmedAt: (hazard: BenchHazard) => number | null
  /** The hazard that has to be confirmed before this component is opened; null where nothing has. */
  openOne: (part: BenchPart | undefined) => BenchHazard | null
  confirm: (hazard: BenchHazard, at: number) => void
}

/** Once a person, a session and a chemistry somebody confirms what is put on. Signing out forgets it. */
export function useBenchHazards(parts: () => readonly BenchPart[]): BenchHazardUse {
  const session = useSessionStore()
  const confirmed = useKept<Record<string, Confirmed>>(sessionStorage, 'potbell-bench-hazards', {})
  const person = computed(() => session.user?.id ?? null)
  const keyOf = ({ kind, part }: BenchHazard): string => `${kind}:${part.material.chemistry}`

  const confirmedAt = (hazard: BenchHazard): number | null =>
    (person.value === null ? null : confirmed.value[person.value]?.[keyOf(hazard)] ?? null)

  function openOne(part: BenchPart | undefined): BenchHazard | null {
    const hazard = part === undefined ? null : hazardOf(part)
    return hazard !== null && confirmedAt(hazard) === null ? hazard : null
  }

  function confirm(hazard: BenchHazard, at: number): void {
    if (person.value === null) return
    confirmed.value = { ...confirmed.value, [person.value]: { ...confirmed.value[person.value], [keyOf(hazard)]: at } }
  }

  watch(person, (now, before) => {
    if (before === null || now === before) return
    confirmed.value = Object.fromEntries(Object.entries(confirmed.value).filter(([userId]) => userId !== before))
  })

  return { hazards: computed(() => hazardsOf(parts())), confirmedAt, openOne, confirm }
}
