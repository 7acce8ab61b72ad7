import type { FormTrouble } from '../lib/use-endpoint-form'
import { useLaboratoryTime } from '../lib/use-laboratory-time'
import { ConfirmDialog } from './dialogs'
import { LoadAgain } from './load-again'
import { Strip } from './sheet'

/** Above a form: what belongs to no field of it, and the question before it is left half filled. */
export function FormProblem({ form }: { form: FormTrouble }) {
  const { problem, homeless, loadedAfter, onLoadedAgain, blocker } = form
  const { at } = useLaboratoryTime()
  const isPlaced = problem !== null && problem.errors.length > 0 && homeless.length === 0
  return (
    <>
      {(problem || homeless.length > 0) && (
        <Strip
          tone="above"
          isAlert
          action={problem?.code === 'stale' && <LoadAgain onLoaded={onLoadedAgain} />}
        >
          {problem?.conflict
            ? `${problem.conflict.changedBy} changed this after you opened it, ${at(problem.conflict.changedAt)}. Load it again to see the change: what you entered stays, and the fields you left alone show what stands now.`
            : isPlaced
              ? 'Please look at the marked fields.'
              : (problem?.message ?? 'Please look at this first:')}
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
      {loadedAfter && (
        <Strip tone="quiet" isAlert>
          Loaded again. What you entered is still here; the fields you left alone show what stands now
          {loadedAfter.conflict ? `, after the change by ${loadedAfter.conflict.changedBy}` : ''}. Look
          through them, then send the form once more.
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
