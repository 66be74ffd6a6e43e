import type { OwnPasswordBody } from '#shared/schemas/people'
import type { Approval, ApprovalBody, Session, SignInBody } from '#shared/schemas/session'
import type { Role } from '#shared/types/roles'
import { may } from '#shared/utils/permissions'
import { insertApproval } from '../repositories/approvals'
import { endSessionsOf, updatePassword } from '../repositories/people'
import { endSession, findSignInUser, holdSignInUser, insertSession, sessionHours } from '../repositories/sessions'
import { readShop } from '../repositories/settings'
import type { Context, UserPrincipal } from '../utils/context'
import { forbidden, Refusal, ruleBroken } from '../utils/errors'
import { sha256 } from '../utils/hash'
import { newId } from '../utils/ids'
import { signInLimit } from '../utils/limits'
import { hashSecret, verifyNobody, verifySecret } from '../utils/password'
import { isoOf, toInstant } from '../utils/rows'
import { mutate } from '../utils/transactions'

const hourMs = 3_600_000
const approvalMs = 5 * 60_000

/** The same words for an unknown address and a wrong password. */
const wrong = () =>
  new Refusal(401, 'wrong-sign-in', 'This e-mail address and password do not go together.', [
    { path: 'password', message: 'This e-mail address and password do not go together.' },
  ])

/**
 * Checks a person's password and opens a session. One that this browser had before ends with it.
 *
 * @param token random value that goes into the cookie; only its hash is stored
 * @throws Refusal 401 for wrong words, 429 after too many of them
 */
export async function signIn(ctx: Context, body: SignInBody, token: string): Promise<Session> {
  const user = await checkPassword(ctx, body)
  const sessionId = sha256(token)
  const deviceId = ctx.principal.device?.id ?? null
  const principal: UserPrincipal = {
    id: user.id, name: user.name, initials: user.initials, email: user.email, role: user.role, sessionId,
    mustChangePassword: user.must_change_password === 1,
  }
  const asUser: Context = { ...ctx, principal: { kind: 'user', user: principal, device: ctx.principal.device } }
  const replaced = ctx.principal.user
  await mutate(asUser, async ({ trx, now, audit, publish }) => {
    if (!(await holdSignInUser(user, trx))) throw wrong()
    const expiresAt = now + sessionHours * hourMs
    await insertSession({ id: sessionId, userId: user.id, deviceId, now, expiresAt }, trx)
    if (replaced) {
      await endSession(replaced.sessionId, 'replaced', now, trx)
      publish(sessionEnded(replaced.sessionId))
    }
    audit({ action: 'session.started', subject: `user:${user.id}`, facts: { deviceId, replacedUserId: replaced?.id ?? null } })
    return null
  })
  return describeSession(asUser)
}

/** Ends the session of the asking browser at once, in every process; its streams close. */
export async function signOut(ctx: Context): Promise<void> {
  const user = ctx.principal.user
  if (!user) return
  await mutate(ctx, async ({ trx, now, audit, publish }) => {
    await endSession(user.sessionId, 'signed-out', now, trx)
    audit({ action: 'session.ended', subject: `user:${user.id}`, facts: { reason: 'signed-out' } })
    publish(sessionEnded(user.sessionId))
    return null
  })
}

/** Closes the streams of a session in every process. */
export const sessionEnded = (id: string) => ({ type: 'session-ended', subject: `session:${id}`, boothId: null, payload: {} })

/** Who this browser is. */
export async function describeSession(ctx: Pick<Context, 'db' | 'principal'>): Promise<Session> {
  const { user, device } = ctx.principal
  return {
    user: user && {
      id: user.id, name: user.name, initials: user.initials, email: user.email, role: user.role, mustChangePassword: user.mustChangePassword ?? false,
    },
    device,
    shop: await readShop(ctx.db),
  }
}

/**
 * A foreman or manager says yes to one thing that a rule forbids, on someone else's screen. The session of that
 * screen stays as it is.
 *
 * @throws Refusal 401 for wrong words, 403 when the person may not approve
 */
export async function approve(ctx: Context, body: ApprovalBody): Promise<Approval> {
  const checked = await checkPassword(ctx, body)
  return mutate(ctx, async ({ trx, now, audit }) => {
    const user = await holdSignInUser(checked, trx)
    if (!user) throw wrong()
    requireApprover(user)
    const id = newId()
    const expiresAt = now + approvalMs
    const { action, subject, reason } = body
    await insertApproval({ id, action, subject, reason, approvedByUserId: user.id, now, expiresAt }, trx)
    audit({ action: 'approval.given', subject: `approval:${id}`, facts: { action, about: subject, approvedByUserId: user.id } })
    return { id, action, subject, approvedByUserId: user.id, expiresAt: isoOf(toInstant(expiresAt)) }
  })
}

/** @throws Refusal 403 when the person may not approve */
function requireApprover({ role, must_change_password: mustChange }: { role: Role; must_change_password: number }): void {
  if (!may(role, 'approvals:give')) throw forbidden('A foreman or manager has to approve this.')
  // A first password is known to whoever typed it: that is nobody's word yet.
  if (mustChange === 1) throw forbidden('Sign in once and choose a password of your own first.')
}

/**
 * Sets the asking person's own password. Every session that was open ends, in every process; the asking browser gets a new one.
 *
 * @param token random value that goes into the cookie; only its hash is stored
 * @throws Refusal 422 beside the field for a wrong present password, 429 after too many of them
 */
export async function changeOwnPassword(ctx: Context, body: OwnPasswordBody, token: string): Promise<Session> {
  const user = ctx.principal.user
  if (!user) throw forbidden()
  const other = () => ruleBroken('wrong-password', 'The present password is another one.', [{ path: 'currentPassword', message: 'The present password is another one.' }])
  const checked = await checkPassword(ctx, { email: user.email, password: body.currentPassword }, other)
  const passwordHash = await hashSecret(body.newPassword)
  const sessionId = sha256(token)
  const asUser: Context = { ...ctx, principal: { ...ctx.principal, kind: 'user', user: { ...user, sessionId, mustChangePassword: false } } }
  await mutate(asUser, async ({ trx, now, audit, publish }) => {
    if (!(await holdSignInUser(checked, trx))) throw other()
    await updatePassword(user.id, passwordHash, false, now, trx)
    const ended = await endSessionsOf(user.id, 'password-changed', now, trx)
    await insertSession({ id: sessionId, userId: user.id, deviceId: ctx.principal.device?.id ?? null, now, expiresAt: now + sessionHours * hourMs }, trx)
    audit({ action: 'user.password-changed', subject: `user:${user.id}`, facts: { endedSessions: ended.length } })
    for (const id of ended) publish(sessionEnded(id))
    return null
  })
  return describeSession(asUser)
}

async function checkPassword(ctx: Context, { email, password }: SignInBody, refusal: () => Refusal = wrong) {
  const limit = signInLimit(ctx.db, email, ctx.principal.device?.id ?? null)
  await limit.consume()
  const user = await findSignInUser(email, ctx.db)
  const right = user?.password_hash ? await verifySecret(user.password_hash, password) : await verifyNobody(password)
  if (!user || !right) throw refusal()
  await limit.clear()
  return user
}
