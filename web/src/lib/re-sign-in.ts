/*
 * When a session runs out, the calls that were refused wait here while the person signs in again in a dialog over
 * the page. Then they are sent once more: a half-filled grid never notices.
 */
import { ProblemError } from './problem-error'

interface Waiting {
  resolve: () => void
  reject: (error: Error) => void
}

let waiting: Waiting[] = []
const listeners = new Set<() => void>()
const notify = () => listeners.forEach((listener) => listener())

export function subscribeToSignInNeed(listener: () => void): () => void {
  listeners.add(listener)
  return () => void listeners.delete(listener)
}

export function isSignInNeeded(): boolean {
  return waiting.length > 0
}

/** Resolves once the person has signed in again; rejects when they would rather leave. */
export function waitForSignIn(): Promise<void> {
  return new Promise((resolve, reject) => {
    waiting.push({ resolve, reject })
    notify()
  })
}

function settle(how: (each: Waiting) => void) {
  const settled = waiting
  waiting = []
  settled.forEach(how)
  notify()
}

export function signedInAgain(): void {
  settle((each) => each.resolve())
}

export function gaveUpSignIn(): void {
  settle((each) =>
    each.reject(
      new ProblemError({
        code: 'signed-out',
        status: 401,
        title: 'Signed out',
        detail: 'You are signed out.',
      }),
    ),
  )
}
