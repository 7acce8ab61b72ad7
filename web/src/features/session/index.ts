import { lazy } from 'react'

export { closeSession, invitationQuery, openSession } from './api/session-api'
export { refusalOf, slipsOf, type FieldErrors } from './components/field-errors'
export { CodeField, isCodeNeeded } from './components/code-field'
export { NewPassphrase } from './components/new-passphrase'

/** Loaded when a session has run out, which most visits never see. */
export const SignInDialog = lazy(async () => ({
  default: (await import('./components/sign-in-dialog')).SignInDialog,
}))
