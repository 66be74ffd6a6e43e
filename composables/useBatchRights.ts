import { computed, type Ref } from 'vue'
import type { Batch } from '#shared/schemas/batches'
import { amendRefusal } from '#shared/utils/amend-rights'
import { may } from '#shared/utils/permissions'
import { useSessionStore } from '~/stores/session'

/** What the person before the screen may do to a batch. The server decides; this only hides. */
export function useBatchRights(batch: Ref<Batch | null | undefined>) {
  const session = useSessionStore()
  const { zone } = useShopTime()
  const now = useShopNow()
  const mayAmend = computed(() => {
    const { user } = session
    const thing = batch.value
    if (!user || !thing || !may(user.role, 'batches:amend')) return false
    return amendRefusal(user, { mixedByUserId: thing.mixedByUserId, mixedAt: Date.parse(thing.mixedAt) }, zone.value, now.value) === null
  })
  const mayReview = computed(() => Boolean(session.user && may(session.user.role, 'batches:review')))
  return { mayAmend, mayReview }
}
