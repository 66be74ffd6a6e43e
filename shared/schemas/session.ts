import * as z from 'zod/mini'
import { roles } from '../types/roles'

/** What the sign-in form sends. */
export const SignInBody = z.strictObject({
  email: z.string('Enter your e-mail address.').check(
    z.trim(),
    z.toLowerCase(),
    z.maxLength(254, 'That address is too long.'),
    z.email('That is not an e-mail address.'),
  ),
  password: z.string('Enter your password.').check(
    z.minLength(1, 'Enter your password.'),
    z.maxLength(256, 'That password is too long.'),
  ),
})
export type SignInBody = z.infer<typeof SignInBody>

/** The signed-in person, as far as screens need to know. */
const SessionUser = z.object({
  id: z.uuid(),
  name: z.string(),
  initials: z.string(),
  email: z.string(),
  role: z.enum(roles),
  /** Somebody else knows the password: nothing else is answered before it is changed. */
  mustChangePassword: z.boolean(),
})

/** What this browser was made to be. */
const SessionDevice = z.object({
  id: z.uuid(),
  kind: z.enum(['bench', 'screen']),
  name: z.string(),
  boothId: z.nullable(z.uuid()),
  scaleId: z.nullable(z.uuid()),
})

/** Who this browser is: a person, an enrolled screen or bench, both, or nobody. */
export const Session = z.object({
  user: z.nullable(SessionUser),
  device: z.nullable(SessionDevice),
  shop: z.object({ name: z.string(), zone: z.string(), currency: z.nullable(z.string()), demo: z.boolean() }),
})
export type Session = z.infer<typeof Session>

/** A foreman's word for one thing that a rule forbids. */
export const ApprovalBody = z.strictObject({
  email: z.string('Enter the e-mail address.').check(z.trim(), z.toLowerCase(), z.maxLength(254), z.email('That is not an e-mail address.')),
  password: z.string('Enter the password.').check(z.minLength(1, 'Enter the password.'), z.maxLength(256)),
  action: z.enum(['use-expired-lot', 'keep-as-poured', 'late-reactive-at', 'use-blocked-lot', 'clean-booth'], 'Say what is approved.'),
  subject: z.string('Say what it is about.').check(z.trim(), z.minLength(1), z.maxLength(96)),
  reason: z.string('Say why.').check(z.trim(), z.minLength(3, 'Say why, in a few words.'), z.maxLength(400, 'Keep it under 400 characters.')),
})
export type ApprovalBody = z.infer<typeof ApprovalBody>

/** A single-use approval, valid for five minutes. */
export const Approval = z.object({
  id: z.uuid(),
  action: z.string(),
  subject: z.string(),
  approvedByUserId: z.uuid(),
  expiresAt: z.string(),
})
export type Approval = z.infer<typeof Approval>
