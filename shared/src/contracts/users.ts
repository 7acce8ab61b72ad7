import { z } from 'zod'
import { ROLES } from '../permissions/index.js'
import {
  day,
  email,
  id,
  idParams,
  instant,
  name,
  note,
  version,
  versioned,
  versionedReason,
} from './common.js'
import { defineEndpoint } from './endpoint.js'

export const authorisation = z.object({
  id,
  methodId: id,
  methodTitle: z.string(),
  activity: z.enum(['read', 'sign-calibration', 'review']),
  validFrom: day,
  validUntil: day,
  evidence: z.string(),
  inForce: z.boolean(),
})
export const userView = z.object({
  id,
  name: z.string(),
  email: z.string(),
  role: z.enum(ROLES),
  clientId: id.nullable(),
  clientName: z.string().nullable(),
  status: z.enum(['invited', 'active', 'disabled']),
  createdAt: instant,
  lastSignedInAt: instant.nullable(),
  /** null: the passphrase alone signs this person in */
  secondFactorSince: instant.nullable(),
  authorisations: z.array(authorisation),
  version,
})
export type UserView = z.infer<typeof userView>

const clientFits = (
  value: { role: string; clientId?: string | null | undefined },
  context: z.RefinementCtx,
) => {
  if (value.role === 'client' && !value.clientId) {
    context.addIssue({
      code: 'custom',
      path: ['clientId'],
      message: 'Choose the utility this person belongs to.',
    })
  }
  if (value.role !== 'client' && value.clientId) {
    context.addIssue({
      code: 'custom',
      path: ['clientId'],
      message: 'Only client accounts belong to a utility.',
    })
  }
}
const account = { name, role: z.enum(ROLES), clientId: id.nullable().optional() }

export const listUsers = defineEndpoint({
  name: 'listUsers',
  summary: 'Everyone with an account',
  method: 'GET',
  path: '/users',
  permission: 'users.read',
  response: z.object({ items: z.array(userView) }),
})
export const inviteUser = defineEndpoint({
  name: 'inviteUser',
  summary: 'Invite a person by e-mail',
  method: 'POST',
  path: '/users',
  permission: 'users.manage',
  body: z.object({ email, ...account }).superRefine(clientFits),
  response: userView,
})
export const inviteUserAgain = defineEndpoint({
  name: 'inviteUserAgain',
  summary: 'Send the invitation again with a new link',
  method: 'POST',
  path: '/users/:id/invite-again',
  permission: 'users.manage',
  params: idParams,
  body: versioned,
  response: userView,
})
export const changeUser = defineEndpoint({
  name: 'changeUser',
  summary: 'Change name, role or utility',
  method: 'PUT',
  path: '/users/:id',
  permission: 'users.manage',
  params: idParams,
  body: z.object({ version, ...account, reason: note.optional() }).superRefine(clientFits),
  response: userView,
})
export const startPassphraseReset = defineEndpoint({
  name: 'startPassphraseReset',
  summary: 'Mail a person a link to choose a new passphrase',
  method: 'POST',
  path: '/users/:id/start-reset',
  permission: 'users.manage',
  params: idParams,
  body: versionedReason,
  response: userView,
})
export const takeOffSecondFactor = defineEndpoint({
  name: 'takeOffSecondFactor',
  summary: 'Take off the second factor of a person who has lost it',
  method: 'POST',
  path: '/users/:id/take-off-second-factor',
  permission: 'users.manage',
  params: idParams,
  body: versionedReason,
  response: userView,
})
export const disableUser = defineEndpoint({
  name: 'disableUser',
  summary: 'Disable an account and end its sessions',
  method: 'POST',
  path: '/users/:id/disable',
  permission: 'users.manage',
  params: idParams,
  body: versionedReason,
  response: userView,
})
export const enableUser = defineEndpoint({
  name: 'enableUser',
  summary: 'Enable a disabled account',
  method: 'POST',
  path: '/users/:id/enable',
  permission: 'users.manage',
  params: idParams,
  body: versionedReason,
  response: userView,
})
export const authoriseUser = defineEndpoint({
  name: 'authoriseUser',
  summary: 'Authorise a person for an activity on a method',
  method: 'POST',
  path: '/users/:id/authorisations',
  permission: 'users.manage',
  params: idParams,
  body: z
    .object({
      methodId: id,
      activity: authorisation.shape.activity,
      validFrom: day,
      validUntil: day,
      evidence: note.min(1, 'Say what shows it.'),
    })
    .refine((v) => v.validUntil > v.validFrom, {
      path: ['validUntil'],
      message: 'The last day must come after the first.',
    }),
  response: userView,
})
export const userEndpoints = [
  listUsers,
  inviteUser,
  inviteUserAgain,
  changeUser,
  startPassphraseReset,
  takeOffSecondFactor,
  disableUser,
  enableUser,
  authoriseUser,
]
