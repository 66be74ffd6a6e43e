import { computed, onMounted, ref } from 'vue'
import type { MaterialItem, MaterialList } from '#shared/schemas/materials'
import { callApi, toFailure } from '~/utils/api'

/** Every material in use, for forms that choose from them. Read once the page is alive. */
export function useAllMaterials() {
  const materials = ref<MaterialItem[]>([])
  const status = ref<'pending' | 'ready' | 'error'>('pending')
  const failure = ref<string | null>(null)

  async function read(): Promise<void> {
    status.value = 'pending'
    try {
      const found: MaterialItem[] = []
      let cursor: string | null = null
      do {
        const page: MaterialList = await callApi<MaterialList>('/api/materials', { query: { limit: 200, cursor: cursor ?? undefined } })
        found.push(...page.items)
        cursor = page.nextCursor
      } while (cursor !== null)
      materials.value = found
      status.value = 'ready'
    }
    catch (error) {
      failure.value = toFailure(error).message
      status.value = 'error'
    }
  }

  onMounted(read)
  return {
    materials, status, failure, read,
    byId: computed(() => new Map(materials.value.map(material => [material.id, material]))),
    options: computed(() => materials.value.map(({ id, code, name }) => ({ value: id, label: `${code} ${name}` }))),
  }
}
