/** What a person may be in the shop. */
export const roles = ['sprayer', 'foreman', 'manager'] as const

export type Role = (typeof roles)[number]

/** Everybody who can ask for something: people, enrolled screens and tablets, the server itself, and who is not known. */
export type Asker = Role | 'bench' | 'screen' | 'system' | 'nobody'
