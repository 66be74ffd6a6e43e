/**
 * Text for a cell of a table that may be opened in a spreadsheet: what would be read as a formula there gets an
 * apostrophe in front. Figures of our own are not sent through here, so that a minus stays a minus.
 */
export function guardedCell(text: string | null): string {
  if (text === null) return ''
  return /^[=+\-@\t\r\n]/.test(text) ? `'${text}` : text
}
