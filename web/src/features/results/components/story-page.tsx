import { useQuery } from '@tanstack/react-query'
import { STATE_MARKS } from '@weirlight/shared/states'
import { Link } from 'react-router-dom'
import { paths, useCan, useLaboratoryTime, useSession } from '../../../lib'
import { Loaded, MarginPage, StatusTag, Strip } from '../../../ui'
import { storyQuery, type StoryView } from '../api/result-queries'
import { determinationOf, findingOf, flagWords, withUnit } from '../result-words'
import { StoryChanges, StoryLines, StoryLots, StoryReadings, StoryStandards, TintRead } from './story-parts'
import { TakeAway } from './take-away'

const LIST = { to: paths.results, label: 'Results' }

/** Pick one number: the page of everything behind it. */
export function StoryById({ id }: { id: string }) {
  return (
    <Loaded query={useQuery(storyQuery(id))} skeleton="page" what="result" back={LIST}>
      {(story) => <StoryOnPage story={story} />}
    </Loaded>
  )
}

function StoryOnPage({ story }: { story: StoryView }) {
  const may = useCan()
  const { name } = useSession()
  const { at, nowText } = useLaboratoryTime()
  const { result, certificate } = story
  const finding = findingOf(result)
  const flags = flagWords(result.flags)
  return (
    <MarginPage
      title={`Behind ${withUnit(result)}`}
      subtitle={
        <>
          {determinationOf(result)} · <Link to={paths.sample(result.sampleId)}>{result.sampleNumber}</Link>
        </>
      }
      back={LIST}
      state={<StatusTag mark={finding.mark}>{`${finding.words} ${limitUnitOf(result)}`.trim()}</StatusTag>}
      facts={[
        result.limitName !== null && { term: 'Limit', detail: result.limitName },
        {
          term: 'On',
          detail: certificate ? (
            <Link to={paths.certificate(certificate.id)}>
              Certificate {certificate.number}
              {certificate.state !== 'issued' && `, ${certificate.state}`}
            </Link>
          ) : (
            'No certificate yet'
          ),
        },
        { term: 'State', detail: <StatusTag mark={STATE_MARKS.result[result.state]} /> },
        {
          term: 'Client and point',
          detail: (
            <>
              {may('clients.read') ? (
                <Link to={paths.client(result.clientId)}>{result.clientName}</Link>
              ) : (
                result.clientName
              )}
              , {result.pointName}
            </>
          ),
        },
        { term: 'Collected', detail: at(result.collectedAt) },
        story.tint && { term: 'Tint read', detail: <TintRead story={story} /> },
        flags.length > 0 && { term: 'Flags', detail: flags.join(', ') },
      ]}
      foldLabel="Certificate, sample and tint"
      notes={[<TakeAway key="take" story={story} canPrint />, story.caution]}
    >
      {!story.same && (
        <Strip tone="above" isAlert title="Numbers differ">
          Computed again from the readings, this is not the stored value. Do not use it; tell the QA manager
          and the administrator.
        </Strip>
      )}
      <p className="only-print note">
        {certificate ? `On certificate ${certificate.number}. ` : ''}
        {result.clientName}, {result.pointName}, collected {at(result.collectedAt)}. Taken away by {name},{' '}
        {nowText()}.
      </p>
      <div className="stack">
        <StoryLines story={story} />
        <StoryChanges changes={story.changes} />
        <StoryReadings readings={story.readings} />
        <StoryStandards story={story} />
        <StoryLots lots={story.lots} />
      </div>
      <p className="note lines-end">{story.caution}</p>
    </MarginPage>
  )
}

const limitUnitOf = ({ limitValue, limitUnit, unit }: StoryView['result']) =>
  limitValue !== null && limitUnit === unit ? unit.replace('ug', 'µg') : ''
