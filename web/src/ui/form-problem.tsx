import type { FormTrouble } from '../lib/use-endpoint-form'
import { useLaboratoryTime } from '../lib/use-laboratory-time'
import { ConfirmDialog } from './dialogs'
import { Strip } from './sheet'

/** Above a form: what belongs to no field of it, and the question before it is left half filled. */
export function FormProblem({ form }: { form: FormTrouble }) {
  const { problem, homeless, isKept, blocker } = form
  const { at } = useLaboratoryTime()
  const isPlaced = problem !== null && problem.errors.length > 0 && homeless.length === 0
  return (
    <>
      {(problem || homeless.length > 0) && (
        <Strip tone="above" isAlert>
          {isPlaced
            ? 'Please look at the marked fields.'
            : (problem?.message ?? 'Please look at this first:')}
          {problem?.conflict && (
            <p>
              Changed by {problem.conflict.changedBy}, {at(problem.conflict.changedAt)}. Load the page again
              to see it;{' '}
              {isKept
                ? 'what you entered here stays as a draft.'
                : 'note what you entered here first, it is not kept.'}
            </p>
          )}
          {homeless.length > 0 && (
            <ul>
              {homeless.map((sentence) => (
                <li key={sentence}>{sentence}</li>
              ))}
            </ul>
          )}
          {problem?.code === 'internal' && problem.requestId && (
            <p className="note">Request {problem.requestId}</p>
          )}
        </Strip>
      )}
      <LeaveDialog blocker={blocker} />
    </>
  )
}

/** Asked before a page with unsent entries is left; use with `useLeaveWarning` outside of `useEndpointForm`. */
export function LeaveDialog({ blocker }: { blocker: FormTrouble['blocker'] }) {
  return (
    <ConfirmDialog
      isOpen={blocker.state === 'blocked'}
      onClose={() => blocker.reset?.()}
      title="Leave this page?"
      consequences={['What you entered has not been sent yet.']}
      actionLabel="Leave"
      cancelLabel="Stay"
      onConfirm={() => blocker.proceed?.()}
    />
  )
}
