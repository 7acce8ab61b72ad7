import { useQueries } from '@tanstack/react-query'
import { determinationName } from '@weirlight/shared/contracts'
import { Button } from 'antd'
import { useState } from 'react'
import { asProblem, byClock, paths, useLaboratoryTime } from '../../../lib'
import { Bar, Failed, MarginPage, SkeletonLines } from '../../../ui'
import { sampleQuery, type SampleView } from '../api/sample-queries'
import { PRESERVATION_WORDS } from '../sample-words'
import { Barcode } from './barcode'
import './labels.css'

const MOST_COPIES = 6

/** Labels to print, one a bottle: the number as text and as a bar code that any scanner reads. */
export function SampleLabels({ ids }: { ids: readonly string[] }) {
  const [copies, setCopies] = useState(1)
  const samples = useQueries({ queries: ids.map((id) => sampleQuery(id)) })
  const found = samples.flatMap(({ data }) => (data ? [data] : []))
  const failed = samples.find(({ error }) => error)
  const only = found.length === 1 ? found[0] : undefined
  return (
    <MarginPage
      title="Labels"
      subtitle={only ? `Sample ${only.number}` : `${ids.length} samples`}
      back={
        only
          ? { to: paths.sample(only.id), label: `Sample ${only.number}` }
          : { to: paths.receiving, label: 'Receiving' }
      }
      notes={[
        'Drawn for labels of 62 mm by 40 mm. In the print dialog choose that paper and no margins.',
        'One label on each bottle, also on what is split off.',
      ]}
      bar={
        <Bar
          lead={
            <label className="row">
              Copies of each
              <select
                className="field"
                value={copies}
                onChange={(event) => setCopies(Number(event.target.value))}
              >
                {Array.from({ length: MOST_COPIES }, (_, index) => (
                  <option key={index} value={index + 1}>
                    {index + 1}
                  </option>
                ))}
              </select>
            </label>
          }
          actions={
            <Button type="primary" disabled={found.length < ids.length} onClick={() => window.print()}>
              Print
            </Button>
          }
        />
      }
    >
      {failed?.error && <Failed problem={asProblem(failed.error)} retry={() => void failed.refetch()} />}
      {found.length === 0 && !failed && <SkeletonLines lines={4} />}
      <div className="labels">
        {found.flatMap((sample) =>
          Array.from({ length: copies }, (_, copy) => <Label key={`${sample.id} ${copy}`} sample={sample} />),
        )}
      </div>
    </MarginPage>
  )
}

function Label({ sample }: { sample: SampleView }) {
  const { at } = useLaboratoryTime()
  const open = sample.details.filter((each) => each.state !== 'withdrawn')
  const [first] = byClock(open, (each) => each.holding.dueAt)
  return (
    <article className="label" aria-label={`Label of ${sample.number}`}>
      <div className="label-number">{sample.number}</div>
      <Barcode text={sample.number} />
      <div className="label-line">
        {sample.pointCode} {sample.pointName}
      </div>
      <div className="label-line">{sample.clientName}</div>
      <div className="label-line">Collected {at(sample.collectedAt)}</div>
      <div className="label-line">
        {open.map((each) => determinationName(each.analyte, each.form)).join(' · ')}
      </div>
      <div className="label-line">
        {sample.preservation === 'none' ? 'Not preserved' : PRESERVATION_WORDS[sample.preservation]}
        {first && ` · read by ${at(first.holding.dueAt)}`}
      </div>
    </article>
  )
}
