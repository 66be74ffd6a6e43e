import type { H3Event } from 'h3'
import { deleteCookie, getCookie, setCookie } from 'h3'
import { useApp } from './app'

const deviceDays = 400

/** `__Host-` and Secure only behind https: a plain-http shop network would lose the cookie otherwise. */
const overTls = () => useApp().config.publicUrl?.startsWith('https:') ?? false
const deviceCookie = () => (overTls() ? '__Host-potbell_device' : 'potbell_device')
const options = () => ({ httpOnly: true, sameSite: 'lax', secure: overTls(), path: '/' }) as const

/** The token of an enrolled device, where this browser has one. */
export const readDeviceToken = (event: H3Event): string | undefined => getCookie(event, deviceCookie())

/** Makes this browser the device; renewed at each use, since browsers drop cookies after 400 days at most. */
export function writeDeviceToken(event: H3Event, token: string): void {
  setCookie(event, deviceCookie(), token, { ...options(), maxAge: deviceDays * 86_400 })
}

/** Forgets the device on this browser. */
export function clearDeviceToken(event: H3Event): void {
  deleteCookie(event, deviceCookie(), options())
}
