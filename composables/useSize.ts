import { onMounted, onScopeDispose, readonly, ref, type Ref } from 'vue'

interface Size { width: number, height: number }

/**
 * Width and height of an element of the template, CSS pixels, and whatever they become.
 *
 * @param initial until the page stands, also on the server
 */
export function useSize(element: Readonly<Ref<HTMLElement | null>>, initial: Size): { width: Readonly<Ref<number>>, height: Readonly<Ref<number>> } {
  const width = ref(initial.width)
  const height = ref(initial.height)
  let observer: ResizeObserver | null = null

  onMounted(() => {
    if (element.value === null) return
    width.value = element.value.offsetWidth
    height.value = element.value.offsetHeight
    observer = new ResizeObserver(([entry]) => {
      if (entry === undefined) return
      width.value = entry.contentRect.width
      height.value = entry.contentRect.height
    })
    observer.observe(element.value)
  })
  onScopeDispose(() => observer?.disconnect())
  return { width: readonly(width), height: readonly(height) }
}
