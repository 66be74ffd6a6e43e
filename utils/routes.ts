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
  materials: (): string => '/materials',
  material: (id: string): string => at('/materials', id),
  lots: (): string => '/lots',
  lot: (id: string): string => at('/lots', id),
  bench: (): string => '/bench',
  screen: (boothId: string): string => at('/screen', boothId),
  shop: (): string => '/shop',
} as const
