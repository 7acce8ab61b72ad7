import { useQuery } from '@tanstack/react-query'
import { returnInstrument, takeInstrumentOut } from '@weirlight/shared/contracts'
import { Button } from 'antd'
import { useState } from 'react'
import { Link } from 'react-router-dom'
import { paths, useCall, useCan, useLaboratoryTime, useNotice } from '../../../lib'
import { Bar, DataTable, Loaded, MarginPage, StatusTag, Strip, UsedIn, type Column } from '../../../ui'
import { ReasonDialog } from '../../../ui/dialogs'
import { FormDialog } from '../../../ui/form-dialog'
import {
  instrumentQuery,
  TOUCHES,
  type InstrumentCheck,
  type InstrumentView,
} from '../api/instrument-queries'
import { CHECK_WORDS, FAILED, instrumentMark, PASSED } from '../instrument-words'
import { RecordCheck } from './record-check'

const LIST = { to: paths.instruments, label: 'Instruments' }

export function InstrumentById({ id }: { id: string }) {
  return (
    <Loaded query={useQuery(instrumentQuery(id))} skeleton="page" what="instrument" back={LIST}>
      {(instrument) => <InstrumentPage instrument={instrument} />}
    </Loaded>
  )
}

function InstrumentPage({ instrument }: { instrument: InstrumentView }) {
  const may = useCan()
  const { today } = useLaboratoryTime()
  return (
    <MarginPage
      title={instrument.name}
      subtitle={instrument.number}
      back={LIST}
      state={<StatusTag mark={instrumentMark(instrument, today())} />}
      foldLabel="The instrument in short"
      facts={[
        { term: 'Next check', detail: instrument.nextCheckDueOn ?? 'none on record' },
        { term: 'Stands in', detail: instrument.location },
        { term: 'Kind', detail: instrument.kind },
        instrument.serial !== '' && { term: 'Serial number', detail: instrument.serial },
        { term: 'Bandwidth', detail: `${instrument.bandwidthNm} nm` },
        may('history.read') && {
          term: 'History',
          detail: (
            <Link to={`${paths.history}?number=${encodeURIComponent(instrument.number)}`}>Every change</Link>
          ),
        },
      ]}
      notes={[
        'A failed check takes the instrument out of use at once. It returns after a passed check of the same kind.',
        'After repair or service a new calibration is due before results are read on it.',
      ]}
      bar={<Bar lead={<h2>Checks</h2>} actions={<Actions instrument={instrument} />} />}
    >
      {!instrument.usable && (
        <Strip tone="above" title="No readings today">
          {instrument.state === 'out-of-use'
            ? 'It is out of use. Look at what was read on it since its last passed check.'
            : 'A check is missing or late. Record it, and readings may go on.'}
        </Strip>
      )}
      <div className="stack">
        <Checks checks={instrument.checks} />
        <UsedIn
          title="What was read on it"
          groups={[
            {
              words: 'Calibrations',
              to: paths.calibration,
              uses: instrument.usedIn.filter((use) => use.kind === 'calibration'),
            },
            {
              words: 'Batches',
              to: paths.batch,
              uses: instrument.usedIn.filter((use) => use.kind !== 'calibration'),
            },
          ]}
          none="Nothing yet."
        />
      </div>
    </MarginPage>
  )
}

function Checks({ checks }: { checks: InstrumentView['checks'] }) {
  const { at } = useLaboratoryTime()
  const columns: Column<InstrumentCheck>[] = [
    { key: 'at', title: 'When', isNarrow: true, text: (row) => at(row.checkedAt) },
    { key: 'kind', title: 'Check', text: (row) => CHECK_WORDS[row.kind] },
    { key: 'passed', title: 'Outcome', cell: (row) => <StatusTag mark={row.passed ? PASSED : FAILED} /> },
    { key: 'nominal', title: 'Nominal', kind: 'number', text: (row) => row.nominal },
    { key: 'found', title: 'Found', kind: 'number', text: (row) => row.found },
    { key: 'tolerance', title: 'Tolerance', kind: 'number', text: (row) => `± ${row.tolerance}` },
    { key: 'unit', title: 'Unit', onPhone: 'beside', text: (row) => row.unit },
    { key: 'reference', title: 'Against', text: (row) => row.reference },
    { key: 'by', title: 'By', text: (row) => row.checkedBy.name },
    { key: 'next', title: 'Next due', text: (row) => row.nextDueOn },
    { key: 'note', title: 'Note', text: (row) => row.note, isSecondary: true },
  ]
  return (
    <DataTable
      label="Checks"
      rows={checks}
      columns={columns}
      rowKey={(row) => row.id}
      empty={{ title: 'It was never checked', text: 'Without a check no readings may be taken on it.' }}
    />
  )
}

function Actions({ instrument }: { instrument: InstrumentView }) {
  const may = useCan()
  const notice = useNotice()
  const [asked, setAsked] = useState<'check' | 'out' | 'return' | null>(null)
  const params = { id: instrument.id }
  const takeOut = useCall(takeInstrumentOut, {
    invalidates: TOUCHES,
    onDone: () => notice.done(`${instrument.number} is out of use.`),
  })
  const putBack = useCall(returnInstrument, {
    invalidates: TOUCHES,
    onDone: () => notice.done(`${instrument.number} is in use again.`),
  })
  const close = () => setAsked(null)
  if (!may('instruments.manage')) return null
  return (
    <>
      {instrument.state === 'in-use' ? (
        <Button danger onClick={() => setAsked('out')}>
          Take out of use
        </Button>
      ) : (
        <Button onClick={() => setAsked('return')}>Return to use</Button>
      )}
      <Button type="primary" onClick={() => setAsked('check')}>
        Record a check
      </Button>
      <FormDialog isOpen={asked === 'check'} onClose={close} title={`Check of ${instrument.number}`}>
        <RecordCheck instrument={instrument} onDone={close} />
      </FormDialog>
      <ReasonDialog
        isOpen={asked === 'out'}
        onClose={close}
        title={`Take ${instrument.number} out of use`}
        consequences={[
          'No reading can be taken on it until it returns. Calibrations on it stay in force, and cannot be used meanwhile.',
        ]}
        actionLabel="Take out of use"
        isDangerous
        onConfirm={(reason) => takeOut.mutateAsync({ params, body: { version: instrument.version, reason } })}
      />
      <ReasonDialog
        isOpen={asked === 'return'}
        onClose={close}
        title={`Return ${instrument.number} to use`}
        consequences={['It needs a check that passed since it was taken out. Say what was done to it.']}
        actionLabel="Return to use"
        onConfirm={(reason) => putBack.mutateAsync({ params, body: { version: instrument.version, reason } })}
      />
    </>
  )
}
