import { computed, inject, type ComputedRef, type InjectionKey } from 'vue'

/** What a field tells the control inside it, so that label, hint and error are wired once. */
export interface FieldContext {
  id: string
  describedBy: ComputedRef<string | undefined>
  invalid: ComputedRef<boolean>
  required: ComputedRef<boolean>
}

export const fieldKey: InjectionKey<FieldContext> = Symbol('field')

/** The field around this control, or an unlabelled stand-in when the control stands alone. Call in setup. */
export function fieldContext(fallbackId: string): FieldContext {
  return inject(fieldKey, () => ({
    id: fallbackId,
    describedBy: computed(() => undefined),
    invalid: computed(() => false),
    required: computed(() => false),
  }), true)
}
