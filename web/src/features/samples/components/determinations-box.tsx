import { useQuery } from '@tanstack/react-query'
import {
  addDetermination,
  determinationName,
  showUnit,
  withdrawDetermination,
} from '@weirlight/shared/contracts'
import { determinationStates, STATE_MARKS } from '@weirlight/shared/states'
import { Button, Form } from 'antd'
import { useState } from 'react'
import { Link } from 'react-router-dom'
import { paths, useCall, useCan, useNotice } from '../../../lib'
import { useEndpointForm } from '../../../lib/use-endpoint-form'
import {
  Bar,
  Box,
  Clock,
  DataTable,
  NumberWithStory,
  SelectInput,
  StatusTag,
  type Column,
  type Mark,
} from '../../../ui'
import { ReasonDialog } from '../../../ui/dialogs'
import { DialogFoot, FormDialog } from '../../../ui/form-dialog'
import { FormProblem } from '../../../ui/form-problem'
import { methodsQuery } from '../../methods'
import { TOUCHES, type Determination, type SampleView } from '../api/sample-queries'

const VERDICTS: Record<string, Mark> = STATE_MARKS.verdict

/** What is determined, how far it is, and what came of it. */
export function DeterminationsBox({ sample }: { sample: SampleView }) {
  const may = useCan()
  const notice = useNotice()
  const [asked, setAsked] = useState<'add' | Determination | null>(null)
  const close = () => setAsked(null)
  const withdraw = useCall(withdrawDetermination, {
    invalidates: TOUCHES,
    onDone: () => notice.done('The determination is withdrawn.'),
  })
  // as it stands now, should somebody change it while the dialogue is open
  const chosen =
    asked === null || asked === 'add' ? null : (sample.details.find((row) => row.id === asked.id) ?? asked)
  const mayReceive = may('samples.receive')
  const isClosed = sample.state === 'rejected' || sample.state === 'disposed'
  const columns: Column<Determination>[] = [
    {
      key: 'what',
      title: 'Determination',
      cell: (row) => (
        <>
          {determinationName(row.analyte, row.form)}
          <br />
          <Link className="note" to={paths.method(row.methodId)}>
            {row.methodTitle}
          </Link>
        </>
      ),
    },
    {
      key: 'state',
      title: 'State',
      onPhone: 'corner',
      cell: (row) => <StatusTag mark={STATE_MARKS.determination[row.state]} />,
    },
    { key: 'holding', title: 'Holding time', cell: (row) => <Holding of={row} /> },
    {
      key: 'batch',
      title: 'Batch',
      cell: (row) => row.batchId && <Link to={paths.batch(row.batchId)}>{row.batchNumber}</Link>,
    },
    {
      key: 'result',
      title: 'Result',
      kind: 'number',
      text: (row) => row.reportedText,
      wrap: (row, aligned) =>
        row.reportedText === null ? (
          aligned
        ) : (
          <NumberWithStory resultId={row.resultId} text={row.reportedText} unit={showUnit(row.unit ?? '')}>
            {aligned}
          </NumberWithStory>
        ),
    },
    {
      key: 'unit',
      title: 'Unit',
      onPhone: 'beside',
      text: (row) => (row.reportedText === null ? '' : showUnit(row.unit ?? '')),
    },
    {
      key: 'verdict',
      title: 'Against the limit',
      cell: (row) => {
        const mark = row.verdict ? VERDICTS[row.verdict] : undefined
        return mark ? <StatusTag mark={mark} /> : null
      },
    },
    {
      key: 'acts',
      title: <span className="visually-hidden">What can be done</span>,
      isNarrow: true,
      cell: (row) =>
        mayReceive &&
        determinationStates.may(row.state, 'withdraw') && (
          <Button size="small" onClick={() => setAsked(row)}>
            Withdraw<span className="visually-hidden"> {determinationName(row.analyte, row.form)}</span>
          </Button>
        ),
    },
  ]
  return (
    <Box>
      <Bar
        lead={<h2>Determinations</h2>}
        actions={mayReceive && !isClosed && <Button onClick={() => setAsked('add')}>Ask for one more</Button>}
      />
      <DataTable
        label="Determinations"
        rows={sample.details}
        columns={columns}
        rowKey={(row) => row.id}
        empty={{ title: 'Nothing is to be determined' }}
      />
      {sample.details.some((row) => row.verdict?.includes('above')) && (
        <p className="note box-foot">
          A result above a limit is a laboratory finding. The agency decides on compliance.
        </p>
      )}
      <FormDialog isOpen={asked === 'add'} onClose={close} title={`Determine more in ${sample.number}`}>
        <AddDetermination sample={sample} onDone={close} />
      </FormDialog>
      {chosen && (
        <ReasonDialog
          isOpen
          onClose={close}
          title={`Withdraw ${determinationName(chosen.analyte, chosen.form)}`}
          consequences={['It leaves the waiting list and is not measured. The request stays in the record.']}
          actionLabel="Withdraw"
          isDangerous
          onConfirm={(reason) =>
            withdraw.mutateAsync({ params: { id: chosen.id }, body: { version: chosen.version, reason } })
          }
        />
      )}
    </Box>
  )
}

/** A running clock while it is unread; afterwards how it stood when it was read. */
function Holding({ of }: { of: Determination }) {
  if (of.state === 'withdrawn') return null
  if (of.state === 'requested' || of.state === 'in-batch') {
    return (
      <>
        <Clock dueAt={of.holding.dueAt} soonHours={24} />
        <div className="note not-on-phone">{of.holding.rule}</div>
      </>
    )
  }
  return of.holding.state === 'breached' ? (
    <StatusTag mark={{ word: 'read too late', shape: 'triangle', tone: 'above' }} />
  ) : (
    <span className="quiet">read in time</span>
  )
}

function AddDetermination({ sample, onDone }: { sample: SampleView; onDone: () => void }) {
  const notice = useNotice()
  const methods = useQuery(methodsQuery)
  const form = useEndpointForm<typeof addDetermination, { methodId: string }>({
    endpoint: addDetermination,
    toInput: (values) => ({
      params: { id: sample.id },
      body: { version: sample.version, methodId: values.methodId ?? '' },
    }),
    invalidates: TOUCHES,
    onDone: () => {
      notice.done('The determination is asked for.')
      onDone()
    },
  })
  const there = new Set(sample.details.map((each) => each.methodId))
  return (
    <Form layout="vertical" {...form.formProps}>
      <FormProblem form={form} />
      <Form.Item name="methodId" label="Method" required>
        <SelectInput
          options={(methods.data?.items ?? [])
            .filter((method) => method.active)
            .map((method) => ({
              value: method.id,
              label: `${determinationName(method.analyte, method.form)} · ${method.title}`,
              why: there.has(method.id) ? 'asked for already' : null,
            }))}
        />
      </Form.Item>
      <DialogFoot onCancel={onDone} isBusy={form.isBusy} actionLabel="Ask for it" />
    </Form>
  )
}
