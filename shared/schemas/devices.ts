import * as z from 'zod/mini'

/** Makes the browser that sends it the screen of a booth, or a bench. */
export const DeviceCreateBody = z.strictObject({
  kind: z.enum(['bench', 'screen'], 'Choose bench or booth screen.'),
  name: z.string('Give it a name.').check(z.trim(), z.minLength(1, 'Give it a name.'), z.maxLength(60, 'Keep the name under 60 characters.')),
  boothId: z.nullable(z.uuid('Choose a booth.')),
  scaleId: z.nullable(z.uuid('Choose a scale.')),
})
export type DeviceCreateBody = z.infer<typeof DeviceCreateBody>

export const DeviceParams = z.object({ id: z.uuid('That is not an id.') })

/** An enrolled browser. */
export const Device = z.object({
  id: z.uuid(),
  kind: z.enum(['bench', 'screen']),
  name: z.string(),
  boothId: z.nullable(z.uuid()),
  boothName: z.nullable(z.string()),
  scaleId: z.nullable(z.uuid()),
  scaleName: z.nullable(z.string()),
  lastSeenAt: z.nullable(z.string()),
  createdAt: z.string(),
  version: z.number(),
})
export type Device = z.infer<typeof Device>

export const DeviceList = z.object({ items: z.array(Device), nextCursor: z.nullable(z.string()) })
