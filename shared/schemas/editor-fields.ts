import * as z from 'zod/mini'

/** Fields that people fill in: bounded by the columns they end in, with messages as a form shows them. */

/** Words that have to be there. */
export const neededText = (missing: string, most: number) =>
  z.string(missing).check(z.trim(), z.minLength(1, missing), z.maxLength(most, `Use at most ${most} characters.`))

/** Words that may be left out; empty ones count as left out. */
export const optionalText = (most: number) =>
  z.nullable(z.string('Write words here.').check(z.trim(), z.minLength(1, 'Write something or leave it out.'), z.maxLength(most, `Use at most ${most} characters.`)))

/** The shop's own short name for a thing: letters, digits and a few marks, no spaces. */
export const Code = z.string('Give it a code.').check(
  z.trim(), z.minLength(1, 'Give it a code.'), z.maxLength(32, 'Use at most 32 characters.'),
  z.regex(/^[\p{L}\p{N}][\p{L}\p{N}._/-]*$/u, 'Use letters, digits, dots, dashes and strokes, without spaces.'),
)

/** Row version that a change was made to. */
export const Version = z.int('Say which version was changed.').check(z.minimum(1, 'Say which version was changed.'))

/** A decimal of so many digits before and after the point; `above` 0 refuses nothing at all. */
export const decimalField = (what: string, whole: number, fraction: number, { above = false }: { above?: boolean } = {}) => {
  const most = fraction === 0 ? 'no decimals' : `at most ${fraction} decimals`
  return z.string(what).check(
    z.regex(new RegExp(`^\\d{1,${whole}}(?:\\.\\d{1,${Math.max(fraction, 1)}})?$`), `${what.replace(/\.$/, '')}, with ${most}.`),
    z.refine(text => !above || /[1-9]/.test(text), 'It must be more than 0.'),
  )
}
