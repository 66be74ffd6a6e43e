import { ref, watch, type Ref } from 'vue'

/** True from the first opening on: what is opened is made then, and may close by its own way afterwards. */
export function useOnceOpen(open: Readonly<Ref<boolean>>): Readonly<Ref<boolean>> {
  const asked = ref(open.value)
  watch(open, (now) => { asked.value ||= now })
  return asked
}
