/** What canonical JSON can hold. Quantities are strings, instants ISO strings or integer milliseconds. */
export type Canonical = null | boolean | number | string | Canonical[] | { [key: string]: Canonical | undefined }

/**
 * JSON with sorted keys and no white space, so that equal values give equal bytes.
 * Keys whose value is undefined are left out.
 *
 * @throws TypeError for a number that is not a safe integer: quantities travel as strings
 */
export function canonicalJson(value: Canonical): string {
  if (Array.isArray(value)) return `[${value.map(canonicalJson).join(',')}]`
  if (value !== null && typeof value === 'object') {
    const pairs = Object.keys(value)
      .sort()
      .flatMap((key) => {
        const member = value[key]
        return member === undefined ? [] : [`${JSON.stringify(key)}:${canonicalJson(member)}`]
      })
    return `{${pairs.join(',')}}`
  }
  if (typeof value === 'number' && !Number.isSafeInteger(value)) {
    throw new TypeError('canonical JSON holds safe integers only; send quantities as strings')
  }
  return JSON.stringify(value)
}
