/** Epoch milliseconds as MariaDB's DATETIME(3) takes it through mysql2 with `timezone: 'Z'`. */
export const toInstant = (ms: number): Date => new Date(ms)

/** The same for a column that may be empty. */
export const toInstantOrNull = (ms: number | null | undefined): Date | null => (ms === null || ms === undefined ? null : toInstant(ms))

/** ISO 8601 UTC with milliseconds of a DATETIME(3) column. */
export const isoOf = (value: Date): string => value.toISOString()

/** The same for a column that may be empty. */
export const isoOrNull = (value: Date | null): string | null => value?.toISOString() ?? null

/** Epoch milliseconds of a column that may be empty. */
export const msOrNull = (value: Date | null): number | null => value?.getTime() ?? null

/**
 * A DECIMAL column as the plain string of the API: no trailing zeros, no empty fraction.
 * MariaDB pads to the column's scale, which says nothing about what was entered.
 */
export function decimalOf(value: string): string {
  return value.includes('.') ? value.replace(/0+$/, '').replace(/\.$/, '') : value
}

/** The same for a column that may be empty. */
export const decimalOrNull = (value: string | null): string | null => (value === null ? null : decimalOf(value))
