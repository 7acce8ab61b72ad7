import { z } from 'zod'
import { deviceCode, instant, passphrase, signInCode } from './common.js'
import { defineEndpoint } from './endpoint.js'

export const getSecondFactor = defineEndpoint({
  name: 'getSecondFactor',
  summary: 'Whether the person signed in has a second factor',
  method: 'GET',
  path: '/account/second-factor',
  permission: 'signed-in',
  response: z.object({ since: instant.nullable(), recoveryCodesLeft: z.number() }),
})
export const startSecondFactor = defineEndpoint({
  name: 'startSecondFactor',
  summary: 'Make the secret for a device; it counts once a code of the device has confirmed it',
  method: 'POST',
  path: '/account/second-factor/start',
  permission: 'signed-in',
  body: z.object({ passphrase }),
  response: z.object({
    /** in base32, as devices take it when it is typed */
    secret: z.string(),
    /** the same and what belongs to it, as devices read it from a picture */
    uri: z.string(),
  }),
})
export const confirmSecondFactor = defineEndpoint({
  name: 'confirmSecondFactor',
  summary: 'Turn the second factor on with a code of the device; the recovery codes are told this once',
  method: 'POST',
  path: '/account/second-factor/confirm',
  permission: 'signed-in',
  body: z.object({ code: deviceCode }),
  response: z.object({ recoveryCodes: z.array(z.string()) }),
})
export const removeSecondFactor = defineEndpoint({
  name: 'removeSecondFactor',
  summary: 'Take off the second factor of one’s own',
  method: 'POST',
  path: '/account/second-factor/remove',
  permission: 'signed-in',
  body: z.object({ passphrase, code: signInCode }),
})
export const secondFactorEndpoints = [
  getSecondFactor,
  startSecondFactor,
  confirmSecondFactor,
  removeSecondFactor,
]
