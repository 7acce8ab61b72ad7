import { isRouteErrorResponse, useRouteError } from 'react-router-dom'
import { ProblemError } from '../lib/problem-error'
import { Failed, NotFoundPage } from '../ui/page-states'

const OLD_PAGE = /dynamically imported module|module script failed|Unable to preload/i

/** A page that broke keeps to itself: the navigation around it still works. */
export function PageFault() {
  const error = useRouteError()
  if (isRouteErrorResponse(error) && error.status === 404) return <NotFoundPage />
  if (error instanceof ProblemError) {
    return (
      <div className="page-sheet">
        <h1 className="visually-hidden">Not loaded</h1>
        <Failed problem={error} retry={() => window.location.reload()} />
      </div>
    )
  }
  const isOld = error instanceof Error && OLD_PAGE.test(error.message)
  return (
    <div className="page-sheet">
      <h1 className="visually-hidden">A fault of this page</h1>
      <div className="box empty" role="alert">
        <strong>{isOld ? 'This page could not be loaded' : 'This page ran into a fault of its own'}</strong>
        <p>
          {isOld
            ? 'The connection broke, or a newer version of Weirlight has been installed. Load the page again.'
            : 'What you sent before is safe on the server. Load the page again; if it happens twice, tell the administrator what you did.'}
        </p>
        {!isOld && error instanceof Error && <p className="note">{error.message}</p>}
        <div className="row">
          <button type="button" className="button main" onClick={() => window.location.reload()}>
            Load again
          </button>
        </div>
      </div>
    </div>
  )
}
