import * as z from 'zod/mini'

/** What a material is bought as. */
export const materialRoles = ['base', 'hardener', 'thinner', 'additive', 'accelerator', 'peroxide', 'ready-to-use'] as const
export const MaterialRole = z.enum(materialRoles, 'Choose a role.')
export type MaterialRole = z.infer<typeof MaterialRole>

/** The part that a material plays in a mix. */
const componentRoles = ['base', 'hardener', 'thinner', 'additive', 'accelerator', 'peroxide'] as const
export const ComponentRole = z.enum(componentRoles, 'Choose a role.')
export type ComponentRole = z.infer<typeof ComponentRole>
