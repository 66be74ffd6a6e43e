import { computed } from 'vue'
import { useSessionStore } from '~/stores/session'
import { clock, day, dayClock } from '~/utils/format'

/** Instants of the API in the shop's zone. The year is left out where it is this one. */
export function useShopTime() {
  const session = useSessionStore()
  const zone = computed(() => session.shop?.zone ?? 'UTC')
  // Taken once on the server, so that both sides draw the same words.
  const drawnAt = useState('drawn-at', () => Date.now())
  return {
    zone,
    /** `Tue 17 Nov 07:54` */
    moment: (iso: string): string => dayClock(Date.parse(iso), zone.value, drawnAt.value),
    /** `Tue 17 Nov` */
    dayOf: (iso: string): string => day(Date.parse(iso), zone.value, drawnAt.value),
    /** `07:54` */
    clockOf: (iso: string): string => clock(Date.parse(iso), zone.value),
  }
}
