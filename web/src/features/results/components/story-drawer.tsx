import { useQuery } from '@tanstack/react-query'
import { Drawer } from 'antd'
import { Link } from 'react-router-dom'
import { paths } from '../../../lib'
import { Loaded, StatusTag, Strip } from '../../../ui'
import { storyQuery, type StoryView } from '../api/result-queries'
import { determinationOf, findingOf, withUnit } from '../result-words'
import {
  SameMark,
  StoredAndRecomputed,
  StoryChanges,
  StoryLines,
  StoryReadings,
  TintRead,
} from './story-parts'
import { TakeAway } from './take-away'

/** What any reported number anywhere opens. */
export function StoryDrawer({ resultId, close }: { resultId: string; close: () => void }) {
  const query = useQuery(storyQuery(resultId))
  const title = query.data ? `Behind ${withUnit(query.data.result)}` : 'What is behind this number'
  return (
    <Drawer
      open
      onClose={close}
      title={title}
      size="min(760px, 100vw)"
      classNames={{ body: 'story-drawer' }}
      extra={<Link to={paths.result(resultId)}>Open as a page</Link>}
    >
      <Loaded query={query} what="result">
        {(story) => <StoryInDrawer story={story} />}
      </Loaded>
    </Drawer>
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
          <div className="quiet">
            Stored and computed again: <SameMark story={story} />
          </div>
        </div>
        <TintRead story={story} />
      </div>
      {!story.same && (
        <Strip tone="above" isAlert title="Numbers differ">
          Computed again from the readings, this is not the stored value. Do not use it; tell the QA manager.
        </Strip>
      )}
      <StoryLines lines={story.lines} />
      <div className="box">
        <StoredAndRecomputed story={story} />
      </div>
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
