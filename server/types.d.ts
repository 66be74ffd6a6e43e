import type { DevicePrincipal, Principal } from './utils/context'

declare module 'h3' {
  interface H3EventContext {
    requestId: string
    /** Monotonic nanoseconds at which the request came in. */
    startedAt?: bigint
    /** Missing when nobody is signed in and the browser is no enrolled device. */
    principal?: Principal
    device?: DevicePrincipal | null
  }
}

declare module '#auth-utils' {
  interface SecureSessionData {
    /** Random 256-bit value; the database knows its hash only. */
    token: string
  }
}

export {}
