import type { Ref } from 'vue'
import type { ScaleSourceState } from '#shared/utils/bench-scale'

/** State of the scale at this bench, for the bar; null while nothing is weighed. */
export const useBenchScaleState = (): Ref<ScaleSourceState | null> => useState<ScaleSourceState | null>('bench-scale', () => null)
