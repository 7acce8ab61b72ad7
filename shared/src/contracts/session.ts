import { z } from 'zod'
import { ROLES } from '../permissions/index.js'
import { email, id, instant, name, newPassphrase, passphrase, signInCode } from './common.js'
import { defineEndpoint } from './endpoint.js'

export const sessionView = z.object({
  userId: id,
  name: z.string(),
  email: z.string(),
  role: z.enum(ROLES),
  clientId: id.nullable(),
  clientName: z.string().nullable(),
  /** the laboratory's time zone (IANA), for every time on the page */
  timeZone: z.string(),
  laboratoryName: z.string(),
  signedInAt: instant,
  /** when the session ends whatever is done */
  endsAt: instant,
  idleMinutes: z.number(),
})
export type SessionView = z.infer<typeof sessionView>

export const signIn = defineEndpoint({
  name: 'signIn',
  summary: 'Sign in with e-mail and passphrase, and with a code where the account has a second factor',
  method: 'POST',
  path: '/session',
  permission: 'public',
  body: z.object({ email, password: passphrase, code: signInCode.optional() }),
  response: sessionView,
})
export const getSession = defineEndpoint({
  name: 'getSession',
  summary: 'Who is signed in; null when nobody is',
  method: 'GET',
  path: '/session',
  permission: 'public',
  response: z.object({ session: sessionView.nullable() }),
})
export const signOut = defineEndpoint({
  name: 'signOut',
  summary: 'Sign out',
  method: 'DELETE',
  path: '/session',
  permission: 'signed-in',
})
export const forgotPassphrase = defineEndpoint({
  name: 'forgotPassphrase',
  summary: 'Ask for a link to set a new passphrase; answers alike whether the account exists or not',
  method: 'POST',
  path: '/session/forgot',
  permission: 'public',
  body: z.object({ email }),
})
export const resetPassphrase = defineEndpoint({
  name: 'resetPassphrase',
  summary: 'Set a new passphrase with the link from the e-mail',
  method: 'POST',
  path: '/session/reset',
  permission: 'public',
  body: z.object({ token: z.string().min(20).max(200), passphrase: newPassphrase }),
})
const tokenParams = z.object({ token: z.string().min(20).max(200) })
export const getInvitation = defineEndpoint({
  name: 'getInvitation',
  summary: 'What an invitation is for',
  method: 'GET',
  path: '/invitations/:token',
  permission: 'public',
  params: tokenParams,
  response: z.object({
    name: z.string(),
    email: z.string(),
    role: z.enum(ROLES),
    laboratoryName: z.string(),
    clientName: z.string().nullable(),
    expiresAt: instant,
  }),
})
export const acceptInvitation = defineEndpoint({
  name: 'acceptInvitation',
  summary: 'Accept an invitation by choosing a passphrase; signs nobody in',
  method: 'POST',
  path: '/invitations/:token/accept',
  permission: 'public',
  params: tokenParams,
  body: z.object({ name, passphrase: newPassphrase }),
})
export const sessionEndpoints = [
  signIn,
  getSession,
  signOut,
  forgotPassphrase,
  resetPassphrase,
  getInvitation,
  acceptInvitation,
]
