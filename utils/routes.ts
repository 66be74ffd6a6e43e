/** The only place that spells the path of a page. Ids are opaque strings (UUIDs, codes). */
const at = (base: string, id: string): string => `${base}/${encodeURIComponent(id)}`

/** Stands in an address where the id of what is there already would stand. */
export const newThing = 'new'

export const routes = {
  home: (): string => '/',
  signIn: (): string => '/sign-in',
  batches: (): string => '/batches',
  batch: (id: string): string => at('/batches', id),
  label: (batchId: string): string => at('/labels', batchId),
  batchSheet: (id: string): string => `${at('/batches', id)}/sheet`,
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
  /** Of a booth, gun and so on; `newThing` instead of an id opens an empty form. */
  booth: (id: string): string => at('/shop/booths', id),
  gun: (id: string): string => at('/shop/guns', id),
  scale: (id: string): string => at('/shop/scales', id),
  mixingCup: (id: string): string => at('/shop/cups', id),
  person: (id: string): string => at('/shop/people', id),
  settings: (): string => '/shop/settings',
  /** The signed-in person's own page. */
  me: (): string => '/shop/me',
} as const

/** A path of this shop out of an address, or null: an address from outside must not be able to send people elsewhere. */
export function localPath(to: unknown): string | null {
  return typeof to === 'string' && /^\/(?![/\\])/.test(to) ? to : null
}
