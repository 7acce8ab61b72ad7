import { useLaboratoryTime } from '../../../lib'
import { Strip } from '../../../ui'
import type { SaveStatus, useCalibrationDraft } from '../hooks/use-calibration-draft'

const WORDS: Record<SaveStatus, (read: number) => string> = {
  saved: (read) => (read === 0 ? 'Nothing read yet.' : `All ${read} readings are saved.`),
  waiting: () => 'Saving in a moment…',
  saving: () => 'Saving…',
  offline: () => 'No connection: everything is kept on this computer and sent when the server answers.',
  blocked: () => 'Kept on this computer; saved once the marked cells are mended or filled in.',
  'needs-reason': () => 'Kept on this computer; a changed reading still needs its reason.',
  stale: () => 'Not saved: somebody else changed this draft.',
  failed: () => 'Not saved: see above the sheet.',
}

/** Whether the sheet has reached the server, in a sentence. */
export function SavedLine({ status, read }: { status: SaveStatus; read: number }) {
  return <p role="status">{WORDS[status](read)}</p>
}

interface SheetTroubleProps {
  sheet: ReturnType<typeof useCalibrationDraft>
  homeless: readonly string[]
}

/** What stands between this sheet and the server, with the way out of it. */
export function SheetTrouble({ sheet, homeless }: SheetTroubleProps) {
  const { at } = useLaboratoryTime()
  const { problem, status, clashes } = sheet
  return (
    <div className="stuck">
      {status === 'stale' && problem && (
        <Strip
          tone="above"
          isAlert
          title="Changed meanwhile"
          action={
            <button type="button" className="button" onClick={() => void sheet.takeTheirs()}>
              Put mine on top of theirs
            </button>
          }
        >
          {problem.conflict
            ? `${problem.conflict.changedBy} changed this draft, ${at(problem.conflict.changedAt)}. `
            : `${problem.message} `}
          What you entered is kept. Cells that only one of you changed are taken from that one.
        </Strip>
      )}
      {clashes.length > 0 && (
        <Strip
          isAlert
          title="Both of you changed"
          action={
            <button type="button" className="button" onClick={sheet.forgetClashes}>
              I have looked
            </button>
          }
        >
          {clashes.length === 1 ? 'One entry' : `${clashes.length} entries`} differed between you. Yours stand
          now; compare them with the other person before you submit.
        </Strip>
      )}
      {status === 'offline' && (
        <Strip title="No connection">
          The server does not answer. Go on: every entry is kept on this computer and sent by itself.
        </Strip>
      )}
      {problem && status === 'failed' && (
        <Strip tone="above" isAlert title="Not saved">
          {problem.message}
        </Strip>
      )}
      {homeless.length > 0 && (
        <Strip tone="above" isAlert>
          <ul>
            {homeless.map((sentence) => (
              <li key={sentence}>{sentence}</li>
            ))}
          </ul>
        </Strip>
      )}
    </div>
  )
}
