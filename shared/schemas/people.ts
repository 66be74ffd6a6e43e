import * as z from 'zod/mini'
import { roles } from '../types/roles'
import { isGuessable } from '../utils/passwords'
import { DateText } from './fields'

/** A password that somebody is going to use from now on. */
const NewPassword = z.string('Choose a password.').check(
  z.minLength(10, { error: 'Use at least 10 characters.', abort: true }),
  z.maxLength(256, 'That password is too long.'),
  z.refine(text => !isGuessable(text), 'That password is among the first that are guessed. Choose another.'),
)

const personShape = {
  name: z.string('Write the name.').check(z.trim(), z.minLength(1, 'Write the name.'), z.maxLength(120, 'Keep the name under 120 characters.')),
  initials: z.string('Write the initials.').check(
    z.trim(), z.minLength(1, 'Write the initials.'), z.maxLength(4, 'Use at most four letters.'), z.regex(/^[\p{L}\p{N}]*$/u, 'Use letters and digits.'),
  ),
  email: z.string('Enter the e-mail address.').check(
    z.trim(), z.toLowerCase(), z.maxLength(254, 'That address is too long.'), z.email('That is not an e-mail address.'),
  ),
  role: z.enum(roles, 'Choose what this person may do.'),
  /** Last day on which a training for isocyanates counts. */
  isocyanateTrainingUntil: z.nullable(DateText),
}

export const PersonCreateBody = z.strictObject({ ...personShape, password: NewPassword })
export type PersonCreateBody = z.infer<typeof PersonCreateBody>

export const PersonPatchBody = z.extend(z.partial(z.strictObject(personShape)), {
  version: z.int('Send the version that was changed.'),
  active: z.optional(z.boolean()),
})
export type PersonPatchBody = z.infer<typeof PersonPatchBody>

/** A first password for somebody who has lost theirs. */
export const PasswordResetBody = z.strictObject({ password: NewPassword })
export type PasswordResetBody = z.infer<typeof PasswordResetBody>

/** Somebody's own new password. */
export const OwnPasswordBody = z.strictObject({
  currentPassword: z.string('Enter your present password.').check(z.minLength(1, 'Enter your present password.'), z.maxLength(256, 'That password is too long.')),
  newPassword: NewPassword,
}).check(z.refine(({ currentPassword, newPassword }) => currentPassword !== newPassword, { error: 'Choose another one than the present.', path: ['newPassword'] }))
export type OwnPasswordBody = z.infer<typeof OwnPasswordBody>
