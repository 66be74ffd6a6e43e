import { onScopeDispose, readonly, ref, type Ref } from 'vue'

/** Whether the screen is as a media query says, now and after it was turned. For pages that are drawn in the browser only. */
export function useMatches(query: string): Readonly<Ref<boolean>> {
  const list = window.matchMedia(query)
  const matches = ref(list.matches)
  const look = (): void => { matches.value = list.matches }
  list.addEventListener('change', look)
  onScopeDispose(() => list.removeEventListener('change', look))
  return readonly(matches)
}
