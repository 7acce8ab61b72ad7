import { Link } from 'react-router-dom'
import { useLaboratoryTime } from '../../../lib'
import { Box, DataTable, StatusTag, type Column } from '../../../ui'
import { Tint } from '../../../ui/tint'
import { paths } from '../../../lib'
import type { StoryView } from '../api/result-queries'
import './results.css'

/* What the drawer and the page of a number share. */

const PLACES: readonly (readonly [start: string, word: string])[] = [
  [paths.calibrations, 'Calibration'],
  [paths.batches, 'Batch'],
  [paths.materials, 'Lot'],
  [paths.certificates, 'Certificate'],
  [paths.receiving, 'Sample'],
]
const placeWord = (to: string) => PLACES.find(([start]) => to.startsWith(start))?.[1] ?? 'Open'

/** the line that compares what is stored with what comes out today; drawn as values beside each other */
const COMPUTED = 'Computed'

/** From the number on the certificate back to the bottle and the stock, in the order it is asked. */
export function StoryLines({ story }: { story: StoryView }) {
  return (
    <dl className="story-lines">
      {story.lines.map((line) => (
        <div key={line.heading}>
          <dt>{line.heading}</dt>
          <dd>
            <div className="story-main">{line.main}</div>
            {line.heading === COMPUTED ? (
              <StoredAndRecomputed story={story} detail={line.detail} />
            ) : (
              <div className="story-more">{line.detail}</div>
            )}
          </dd>
          <dd className="no-print">{line.to && <Link to={line.to}>{placeWord(line.to)}</Link>}</dd>
        </div>
      ))}
    </dl>
  )
}

const SAME = { word: 'same', shape: 'disc', tone: 'meets' } as const
const DIFFERENT = { word: 'different', shape: 'triangle', tone: 'above' } as const

/** The stored number beside the one that today's code finds from the same readings. */
function StoredAndRecomputed({ story, detail }: { story: StoryView; detail: string }) {
  return (
    <dl className="story-same">
      <dt>Stored</dt>
      <dd>{String(story.stored)} mg/L</dd>
      <dt>Computed again</dt>
      <dd>{String(story.recomputed)} mg/L</dd>
      <dt>Engine</dt>
      <dd>{story.engineVersion}</dd>
      <dt>They are</dt>
      <dd>
        <StatusTag mark={story.same ? SAME : DIFFERENT} />
        {!story.same && <div className="story-more">{detail}</div>}
      </dd>
    </dl>
  )
}

export function TintRead({ story }: { story: StoryView }) {
  if (!story.tint) return null
  return (
    <span className="row">
      <Tint band={story.tint.band} absorbance={story.tint.absorbance} size="large" />A{' '}
      {story.tint.absorbance.toFixed(4)}
    </span>
  )
}

type Reading = StoryView['readings'][number]

/** Every reading there was; one that was replaced stays, struck through, with the reason of its successor. */
export function StoryReadings({ readings }: { readings: StoryView['readings'] }) {
  const { day, clock } = useLaboratoryTime()
  const columns: Column<Reading>[] = [
    { key: 'replicate', title: 'Replicate', isNarrow: true, text: (row) => String(row.replicate) },
    {
      key: 'absorbance',
      title: 'Absorbance',
      kind: 'number',
      text: (row) => row.absorbance,
      wrap: (row, aligned) => (row.superseded ? <s className="is-superseded">{aligned}</s> : aligned),
    },
    {
      key: 'stands',
      title: 'Counts',
      cell: (row) =>
        row.superseded ? (
          <StatusTag mark={{ word: 'superseded', shape: 'diamond', tone: 'caution' }} />
        ) : (
          <StatusTag mark={{ word: 'counts', shape: 'disc', tone: 'meets' }} />
        ),
    },
    { key: 'at', title: 'Read', text: (row) => `${day(row.at)} ${clock(row.at)}` },
    { key: 'by', title: 'By', text: (row) => row.by },
    { key: 'source', title: 'Entered', text: (row) => row.source.replaceAll('-', ' ') },
    { key: 'reason', title: 'Reason for the change', text: (row) => row.reason || null },
  ]
  const replaced = readings.filter((row) => row.superseded).length
  return (
    <Box title={replaced > 0 ? `Readings, ${replaced} of them superseded` : 'Readings'}>
      <DataTable
        label="Readings"
        rows={readings}
        columns={columns}
        rowKey={(row) => row.id}
        empty={{ title: 'No reading is recorded' }}
      />
    </Box>
  )
}

type Change = StoryView['changes'][number]

/** What a person changed between the reading and the release. */
export function StoryChanges({ changes }: { changes: StoryView['changes'] }) {
  const { at } = useLaboratoryTime()
  if (changes.length === 0) return null
  const columns: Column<Change>[] = [
    { key: 'what', title: 'Changed by hand', text: (row) => row.what },
    { key: 'from', title: 'From', kind: 'number', text: (row) => row.from || '–' },
    { key: 'to', title: 'To', kind: 'number', text: (row) => row.to || '–' },
    { key: 'reason', title: 'Reason', text: (row) => row.reason || '–' },
    { key: 'by', title: 'By', text: (row) => row.by },
    { key: 'at', title: 'When', text: (row) => at(row.at) },
  ]
  return (
    <Box title={changes.length === 1 ? 'One change by hand' : `${changes.length} changes by hand`}>
      <DataTable
        label="Changes by hand"
        rows={changes}
        columns={columns}
        rowKey={(row) => `${row.what}${row.at}${row.to}`}
        empty={{ title: 'Nothing was changed by hand' }}
      />
    </Box>
  )
}

type Standard = StoryView['standards'][number]

export function StoryStandards({ story }: { story: StoryView }) {
  const { at } = useLaboratoryTime()
  const { calibration, standards } = story
  const columns: Column<Standard>[] = [
    { key: 'position', title: '#', isNarrow: true, text: (row) => String(row.position) },
    {
      key: 'concentration',
      title: 'Concentration',
      unit: 'mg/L',
      kind: 'number',
      text: (row) => row.concentration,
    },
    { key: 'absorbances', title: 'Absorbances', text: (row) => row.absorbances.join(', ') || '–' },
    {
      key: 'lot',
      title: 'Lot',
      cell: (row) => (row.lotId ? <Link to={paths.material(row.lotId)}>{row.lotNumber ?? 'lot'}</Link> : '–'),
    },
  ]
  return (
    <Box
      title={
        <>
          Standards of <Link to={paths.calibration(calibration.id)}>{calibration.number}</Link>
        </>
      }
    >
      <p className="quiet story-equation">
        {calibration.equation}, c in mg/L
        {calibration.signedBy !== '' &&
          `; signed by ${calibration.signedBy}${calibration.signedAt ? ` ${at(calibration.signedAt)}` : ''}`}
      </p>
      <DataTable
        label="Standards"
        rows={standards}
        columns={columns}
        rowKey={(row) => String(row.position)}
        empty={{ title: 'No standard is recorded' }}
      />
    </Box>
  )
}

type Lot = StoryView['lots'][number]

export function StoryLots({ lots }: { lots: StoryView['lots'] }) {
  const columns: Column<Lot>[] = [
    { key: 'number', title: 'Lot', isNarrow: true, text: (row) => row.number },
    { key: 'name', title: 'What', text: (row) => row.name },
    { key: 'role', title: 'Used as', text: (row) => row.role.replaceAll('-', ' ') },
    { key: 'detail', title: 'Where it comes from', text: (row) => row.detail },
  ]
  return (
    <Box title="Lots, back to the stock">
      <DataTable
        label="Lots"
        rows={lots}
        columns={columns}
        rowKey={(row) => `${row.id}${row.role}`}
        rowTo={(row) => paths.material(row.id)}
        empty={{ title: 'No lot is recorded' }}
      />
    </Box>
  )
}
