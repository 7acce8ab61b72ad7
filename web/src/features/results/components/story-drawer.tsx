import { useQuery } from '@tanstack/react-query'
import { useEffect, useId, useRef } from 'react'
import { Link } from 'react-router-dom'
import { paths } from '../../../lib'
import { Loaded, StatusTag, Strip } from '../../../ui'
import { storyQuery, type StoryView } from '../api/result-queries'
import { determinationOf, findingOf, withUnit } from '../result-words'
import { StoryChanges, StoryLines, StoryReadings, TintRead } from './story-parts'
import { TakeAway } from './take-away'

/** What any reported number anywhere opens. A dialog of the browser's own: keyboard and reader stay inside it. */
export function StoryDrawer({ resultId, close }: { resultId: string; close: () => void }) {
  const query = useQuery(storyQuery(resultId))
  const dialog = useRef<HTMLDialogElement>(null)
  const titleId = useId()
  useEffect(() => {
    const element = dialog.current
    element?.showModal()
    return () => element?.close()
  }, [])
  return (
    <dialog
      ref={dialog}
      className="story-drawer"
      aria-labelledby={titleId}
      onCancel={(event) => {
        event.preventDefault()
        close()
      }}
      onClick={(event) => {
        // beside the drawer: the dialog itself is what was clicked
        if (event.target === dialog.current) close()
      }}
    >
      <div className="story-frame">
        <header className="story-bar">
          <h2 id={titleId}>
            {query.data ? `Behind ${withUnit(query.data.result)}` : 'What is behind this number'}
          </h2>
          <Link to={paths.result(resultId)}>Open as a page</Link>
          <button type="button" className="button" onClick={close}>
            Close
          </button>
        </header>
        <Loaded query={query} what="result">
          {(story) => <StoryInDrawer story={story} />}
        </Loaded>
      </div>
    </dialog>
  )
}

function StoryInDrawer({ story }: { story: StoryView }) {
  const { result, certificate } = story
  const finding = findingOf(result)
  return (
    <div className="stack">
      <div className="story-head">
        <div className="grow">
          <div>
            {determinationOf(result)} · <Link to={paths.sample(result.sampleId)}>{result.sampleNumber}</Link>{' '}
            · {result.pointName}
          </div>
          <div>
            <StatusTag mark={finding.mark}>{finding.words}</StatusTag>
            {certificate && (
              <>
                {' '}
                · on <Link to={paths.certificate(certificate.id)}>{certificate.number}</Link>
              </>
            )}
          </div>
        </div>
        <TintRead story={story} />
      </div>
      {!story.same && (
        <Strip tone="above" isAlert title="Numbers differ">
          Computed again from the readings, this is not the stored value. Do not use it; tell the QA manager.
        </Strip>
      )}
      <StoryLines story={story} />
      <StoryChanges changes={story.changes} />
      <StoryReadings readings={story.readings} />
      <p className="note">
        Standards and lots stand on <Link to={paths.result(result.id)}>the number’s own page</Link>.
      </p>
      <TakeAway story={story} />
      <p className="note">{story.caution}</p>
    </div>
  )
}
