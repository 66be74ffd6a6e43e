import type { Ref } from 'vue'
import { useKept } from '~/composables/useKept'

/** Whether this bench sounds: on until somebody turns it off here. */
export const useBenchSoundOn = (): Ref<boolean> => useKept(localStorage, 'potbell-bench-sound', true)
