/** As many browsers as a large shop has, with their cookies renewed now and then. */
const most = 2_000

const opened = new Map<string, string>()

/**
 * The random token in a sealed session cookie. A cookie's seal is opened once: that costs more than all the rest of a short
 * request. Whether the token still opens anything, the database says at each request.
 *
 * @param sealed the cookie as the browser sent it
 * @param open opens the seal; undefined where it is not ours or too old
 */
export async function tokenOf(sealed: string, open: () => Promise<string | undefined>): Promise<string | undefined> {
  const known = opened.get(sealed)
  if (known !== undefined) return known
  const token = await open()
  if (token === undefined) return undefined
  if (opened.size >= most) opened.delete(opened.keys().next().value ?? '')
  opened.set(sealed, token)
  return token
}
