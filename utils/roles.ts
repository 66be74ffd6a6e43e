/** Roles of a component in a mix, in pouring order. A pattern always means the role, never the colour of the paint. */
export const COMPONENT_ROLES = ['base', 'hardener', 'thinner', 'fourth'] as const
export type ComponentRole = typeof COMPONENT_ROLES[number]
