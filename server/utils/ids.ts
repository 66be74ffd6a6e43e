import { randomUUID } from 'node:crypto'

/** A fresh UUID for a row made by the server. */
export const newId = (): string => randomUUID()
