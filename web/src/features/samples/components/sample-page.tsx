import { useQuery } from '@tanstack/react-query'
import { STATE_MARKS } from '@weirlight/shared/states'
import { Button } from 'antd'
import { useState } from 'react'
import { Link } from 'react-router-dom'
import { byClock, paths, useCan, useLaboratoryTime } from '../../../lib'
import { Bar, Box, Clock, Columns, KeyValues, Loaded, MarginPage, StatusTag, Strip } from '../../../ui'
import { FormDialog } from '../../../ui/form-dialog'
import { sampleQuery, type SampleView } from '../api/sample-queries'
import { CONTAINER_WORDS, isUndecided, KIND_WORDS, PRESERVATION_WORDS, PURPOSE_WORDS } from '../sample-words'
import { AcceptanceBox } from './acceptance-box'
import { CorrectSample } from './correct-sample'
import { DeterminationsBox } from './determinations-box'

const LIST = { to: paths.receiving, label: 'Receiving' }

export function SampleById({ id }: { id: string }) {
  return (
    <Loaded query={useQuery(sampleQuery(id))} skeleton="page" what="sample" back={LIST}>
      {(sample) => <SamplePage sample={sample} />}
    </Loaded>
  )
}

const isUnmeasured = (each: SampleView['details'][number]) =>
  each.state === 'requested' || each.state === 'in-batch'

function SamplePage({ sample }: { sample: SampleView }) {
  const may = useCan()
  const { withOffset } = useLaboratoryTime()
  const [first] = byClock(sample.details.filter(isUnmeasured), (each) => each.holding.dueAt)
  return (
    <MarginPage
      title={`Sample ${sample.number}`}
      subtitle={`${sample.pointName} · ${sample.clientName}`}
      back={LIST}
      state={<StatusTag mark={STATE_MARKS.sample[sample.state]} />}
      foldLabel="Who, where and when"
      facts={[
        first && { term: 'Holding time', detail: <Clock dueAt={first.holding.dueAt} soonHours={24} /> },
        { term: 'Purpose and kind', detail: `${PURPOSE_WORDS[sample.purpose]} · ${KIND_WORDS[sample.kind]}` },
        {
          term: 'Client',
          detail: may('clients.read') ? (
            <Link to={paths.client(sample.clientId)}>{sample.clientName}</Link>
          ) : (
            sample.clientName
          ),
        },
        {
          term: 'Sampling point',
          detail: (
            <Link to={`${paths.receiving}?clientId=${sample.clientId}&pointId=${sample.pointId}`}>
              {sample.pointCode} {sample.pointName}
            </Link>
          ),
        },
        { term: 'Collected', detail: `${withOffset(sample.collectedAt)} by ${sample.collectedBy}` },
        sample.receivedAt !== null && {
          term: 'Received',
          detail: `${withOffset(sample.receivedAt)}${sample.receivedBy ? ` by ${sample.receivedBy.name}` : ''}`,
        },
        may('history.read') && {
          term: 'History',
          detail: (
            <Link to={`${paths.history}?number=${encodeURIComponent(sample.number)}`}>
              Every change to it
            </Link>
          ),
        },
      ]}
      notes={[
        sample.remarks !== '' && (
          <>
            <strong>Remarks.</strong> {sample.remarks}
          </>
        ),
      ]}
      bar={<SampleBar sample={sample} />}
    >
      {isUndecided(sample) && (
        <Strip title="To be decided">
          {sample.suggested === 'accepted'
            ? 'It was received. Accept it, and it waits for a batch.'
            : 'It was received, and a check is not met. Decide what becomes of it.'}
        </Strip>
      )}
      <Columns side={<AsReceived sample={sample} />}>
        {isUndecided(sample) && <AcceptanceBox sample={sample} />}
        <DeterminationsBox sample={sample} />
        {!isUndecided(sample) && <AcceptanceBox sample={sample} />}
      </Columns>
    </MarginPage>
  )
}

function SampleBar({ sample }: { sample: SampleView }) {
  const may = useCan()
  const open = sample.details.filter(isUnmeasured).length
  const mayReceive = may('samples.receive')
  return (
    <Bar
      lead={open === 0 ? 'Nothing is left to read.' : `${open} of ${sample.details.length} still to be read`}
      actions={
        <>
          <Link className="button" to={`${paths.labels}?samples=${sample.id}`}>
            Label
          </Link>
          {mayReceive && (
            <Link className="button" to={`${paths.receive}?client=${sample.clientId}`}>
              Receive another
            </Link>
          )}
        </>
      }
    />
  )
}

function AsReceived({ sample }: { sample: SampleView }) {
  const may = useCan()
  const [isCorrecting, setCorrecting] = useState(false)
  const isClosed = sample.state === 'disposed' || sample.state === 'rejected'
  return (
    <>
      <Box title="As received">
        <KeyValues
          items={[
            { term: 'Preserved with', detail: PRESERVATION_WORDS[sample.preservation] },
            { term: 'pH', detail: sample.ph || 'not measured' },
            {
              term: 'Temperature',
              detail: sample.temperatureC ? `${sample.temperatureC} °C` : 'not measured',
            },
            { term: 'Container', detail: CONTAINER_WORDS[sample.container] },
            { term: 'Filtered in the field', detail: sample.filteredInField ? 'yes' : 'no' },
            { term: 'Condition', detail: sample.condition || 'nothing noted' },
          ]}
        />
        {may('samples.receive') && !isClosed && (
          <div className="box-foot">
            <Button onClick={() => setCorrecting(true)}>Correct what was recorded</Button>
          </div>
        )}
        <FormDialog
          isOpen={isCorrecting}
          onClose={() => setCorrecting(false)}
          title={`Correct ${sample.number}`}
        >
          <CorrectSample sample={sample} onDone={() => setCorrecting(false)} />
        </FormDialog>
      </Box>
      <Box title="Certificates">
        {sample.certificates.length === 0 ? (
          <p className="note">None yet. One is made once its results are released.</p>
        ) : (
          <ul className="plain-list stack">
            {sample.certificates.map((certificate) => (
              <li key={certificate.id}>
                <Link to={paths.certificate(certificate.id)}>{certificate.number}</Link>{' '}
                <CertificateState state={certificate.state} />
              </li>
            ))}
          </ul>
        )}
      </Box>
    </>
  )
}

function CertificateState({ state }: { state: string }) {
  const marks: Record<string, (typeof STATE_MARKS.certificate)['issued' | 'superseded' | 'withdrawn']> =
    STATE_MARKS.certificate
  const mark = marks[state]
  return mark ? <StatusTag mark={mark} /> : <span className="quiet">{state}</span>
}
