import { nextTick, watch, type Ref } from 'vue'
import { useEventListener } from '@vueuse/core'

interface RowKeys {
  items: Readonly<Ref<readonly { id: string }[]>>
  openId: Readonly<Ref<string | null>>
  open: (id: string | null) => void
}

/**
 * While a row is open beside its list, the arrows up and down open its neighbours, wherever in the two the keyboard is.
 * The open row stays in sight: the list gets narrower beside the drawer, and its rows move.
 */
export function useRowKeys({ items, openId, open }: RowKeys): void {
  useEventListener('keydown', (event: KeyboardEvent) => {
    const step = { ArrowDown: 1, ArrowUp: -1 }[event.key]
    if (step === undefined || openId.value === null || event.ctrlKey || event.metaKey || event.altKey) return
    const target = event.target as HTMLElement | null
    // What is typed in, and what stands in front of the drawer, keeps its own arrows.
    if (target?.closest('input, select, textarea, form, [data-reka-popper-content-wrapper]')) return
    const here = items.value.findIndex(({ id }) => id === openId.value)
    const next = here < 0 ? undefined : items.value[here + step]
    event.preventDefault()
    event.stopPropagation()
    if (!next) return
    open(next.id)
    const row = document.querySelectorAll<HTMLElement>('tr[data-row]')[here + step]
    if (target?.closest('tr[data-row]')) void nextTick(() => row?.focus())
  }, { capture: true })
  watch(openId, async (id) => {
    if (id === null) return
    await nextTick()
    document.querySelector('tr[data-selected]')?.scrollIntoView({ block: 'nearest' })
  }, { flush: 'post' })
}
