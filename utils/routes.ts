/** The only place that spells the path of a page. Ids are opaque strings (UUIDs, codes). */
const at = (base: string, id: string): string => `${base}/${encodeURIComponent(id)}`

export const routes = {
  home: (): string => '/',
  signIn: (): string => '/sign-in',
  batches: (): string => '/batches',
  batch: (id: string): string => at('/batches', id),
  label: (batchId: string): string => at('/labels', batchId),
  jobs: (): string => '/jobs',
  job: (id: string): string => at('/jobs', id),
  schedules: (): string => '/schedules',
  schedule: (id: string): string => at('/schedules', id),
  mixes: (): string => '/mixes',
  mix: (id: string): string => at('/mixes', id),
  mixRevision: (id: string, revisionId: string): string => `${at('/mixes', id)}?revisionId=${encodeURIComponent(revisionId)}`,
  mixNew: (): string => '/mixes/new',
  mixRevise: (id: string): string => `${at('/mixes', id)}/revise`,
  materials: (): string => '/materials',
  material: (id: string): string => at('/materials', id),
  materialNew: (): string => '/materials/new',
  materialEdit: (id: string): string => `${at('/materials', id)}/edit`,
  lots: (): string => '/lots',
  lot: (id: string): string => at('/lots', id),
  /** With a material, the form starts from it. */
  lotNew: (materialId?: string): string => materialId === undefined ? '/lots/new' : `/lots/new?materialId=${encodeURIComponent(materialId)}`,
  lotEdit: (id: string): string => `${at('/lots', id)}/edit`,
  bench: (): string => '/bench',
  screen: (boothId: string): string => at('/screen', boothId),
  shop: (): string => '/shop',
} as const
