import { decideAcceptance } from '@weirlight/shared/contracts'
import { STATE_MARKS } from '@weirlight/shared/states'
import { Button, Form, Input } from 'antd'
import { useState } from 'react'
import { useCall, useCan, useNotice } from '../../../lib'
import { useEndpointForm } from '../../../lib/use-endpoint-form'
import { Box, KeyValues, MarkShape, StatusTag, Refused } from '../../../ui'
import { DialogFoot, FormDialog } from '../../../ui/form-dialog'
import { FormProblem } from '../../../ui/form-problem'
import { TOUCHES, type SampleView } from '../api/sample-queries'
import { checkWords, isUndecided, SUGGESTED_WORDS } from '../sample-words'
import './samples.css'

/** The checks at receipt, the verdict they lead to, and the decision: taken, or to be taken here. */
export function AcceptanceBox({ sample }: { sample: SampleView }) {
  const may = useCan()
  const undecided = isUndecided(sample)
  return (
    <Box title={undecided ? 'Acceptance: to be decided' : 'Acceptance'}>
      <Checks checks={sample.checks} />
      {undecided ? (
        <div className="box-foot">
          <p>
            <StatusTag mark={STATE_MARKS.sample[sample.suggested]}>
              {SUGGESTED_WORDS[sample.suggested]}
            </StatusTag>
          </p>
          {may('samples.receive') && <Decision sample={sample} />}
        </div>
      ) : (
        <Decided sample={sample} />
      )}
    </Box>
  )
}

/** What failed stands first. */
function Checks({ checks }: { checks: SampleView['checks'] }) {
  return (
    <ul className="acceptance-checks">
      {checks
        .toSorted((a, b) => Number(a.ok) - Number(b.ok))
        .map((check) => (
          <li key={check.check}>
            <span className={`state is-${check.ok ? 'meets' : 'above'}`}>
              <MarkShape shape={check.ok ? 'disc' : 'triangle'} />
              <span className="visually-hidden">{check.ok ? 'met:' : 'not met:'}</span>
            </span>
            <span>{checkWords(check.check)}</span>
            <span className={check.ok ? 'quiet' : 'above'}>{check.finding}</span>
          </li>
        ))}
    </ul>
  )
}

function Decided({ sample }: { sample: SampleView }) {
  if (sample.acceptanceReason === '' && sample.clientConsent === '') return null
  return (
    <div className="box-foot">
      <KeyValues
        items={[
          sample.acceptanceReason !== '' && { term: 'Reason given', detail: sample.acceptanceReason },
          sample.clientConsent !== '' && { term: 'What the client wrote', detail: sample.clientConsent },
        ]}
      />
    </div>
  )
}

type Verdict = SampleView['suggested']

function Decision({ sample }: { sample: SampleView }) {
  const notice = useNotice()
  const [asked, setAsked] = useState<Exclude<Verdict, 'accepted'> | null>(null)
  const accept = useCall(decideAcceptance, {
    invalidates: TOUCHES,
    onDone: () => notice.done(`${sample.number} is accepted.`),
  })
  const close = () => setAsked(null)
  const acceptNow = () =>
    accept.mutate({
      params: { id: sample.id },
      body: { version: sample.version, verdict: 'accepted', reason: '', clientConsent: '' },
    })
  const tone = (verdict: Verdict) => (sample.suggested === verdict ? 'primary' : 'default')
  return (
    <div className="box-foot">
      <Refused problem={accept.error} reset={accept.reset} />
      <div className="row">
        {sample.suggested === 'accepted' && (
          <Button type="primary" loading={accept.isPending} onClick={acceptNow}>
            Accept
          </Button>
        )}
        <Button
          type={tone('accepted-with-qualification')}
          onClick={() => setAsked('accepted-with-qualification')}
        >
          Accept with a qualification
        </Button>
        <Button danger type={tone('rejected')} onClick={() => setAsked('rejected')}>
          Reject
        </Button>
        {sample.suggested === 'accepted' && (
          <span className="note">An accepted sample waits for a batch at once.</span>
        )}
      </div>
      <FormDialog
        isOpen={asked !== null}
        onClose={close}
        title={
          asked === 'rejected' ? `Reject ${sample.number}` : `Accept ${sample.number} with a qualification`
        }
      >
        {asked && <DecisionForm sample={sample} verdict={asked} onDone={close} />}
      </FormDialog>
    </div>
  )
}

interface DecisionFormProps {
  sample: SampleView
  verdict: Exclude<Verdict, 'accepted'>
  onDone: () => void
}

function DecisionForm({ sample, verdict, onDone }: DecisionFormProps) {
  const notice = useNotice()
  const isRejection = verdict === 'rejected'
  const needsConsent = !isRejection && sample.purpose === 'compliance'
  const form = useEndpointForm<typeof decideAcceptance, { reason: string; clientConsent: string }>({
    endpoint: decideAcceptance,
    toInput: (values) => ({
      params: { id: sample.id },
      body: {
        version: sample.version,
        verdict,
        reason: values.reason ?? '',
        clientConsent: values.clientConsent ?? '',
      },
    }),
    invalidates: TOUCHES,
    onDone: () => {
      notice.done(`${sample.number} is ${isRejection ? 'rejected' : 'accepted with a qualification'}.`)
      onDone()
    },
  })
  const bad = sample.checks.filter((check) => !check.ok)
  return (
    <Form layout="vertical" {...form.formProps}>
      <FormProblem form={form} />
      <div className="stack dialog-words">
        <p>
          {isRejection
            ? 'Nothing is determined in it; what waits is withdrawn. Tell the client, and ask for another sample.'
            : 'It is analysed. The reason is printed with its results, so that every reader knows.'}
        </p>
        {bad.length > 0 && <p className="quiet">Not met: {bad.map((check) => check.finding).join(' ')}</p>}
      </div>
      <Form.Item
        name="reason"
        label="Reason"
        required
        extra="Printed with the results, and kept with your name."
      >
        <Input.TextArea autoSize={{ minRows: 2, maxRows: 6 }} autoFocus />
      </Form.Item>
      {!isRejection && (
        <Form.Item
          name="clientConsent"
          label="What the client wrote"
          required={needsConsent}
          extra={
            needsConsent
              ? 'A compliance sample goes on only when the client asks for it in writing: who wrote it, and when.'
              : 'Who was asked, and what they said. May stay empty.'
          }
        >
          <Input.TextArea autoSize={{ minRows: 1, maxRows: 4 }} />
        </Form.Item>
      )}
      <DialogFoot
        onCancel={onDone}
        isBusy={form.isBusy}
        actionLabel={isRejection ? 'Reject it' : 'Accept it with this'}
      />
    </Form>
  )
}
