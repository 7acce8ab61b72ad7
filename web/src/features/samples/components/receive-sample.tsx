import { useState } from 'react'
import { useLaboratoryTime } from '../../../lib'
import type { SampleView } from '../api/sample-queries'
import { emptyForm, nextOfRound, type ReceiveValues } from '../receive/receive-values'
import { ReceiveForm } from './receive-form'
import { ReceivedPanel } from './received-panel'

interface Round {
  values: ReceiveValues
  isNext: boolean
}

/** Bottle after bottle: the form, then the number large with what to decide, then the form again. */
export function ReceiveSample({ clientId }: { clientId: string }) {
  const { parse, nowText } = useLaboratoryTime()
  // most bottles are written down as they come in; the time stands there to be changed
  const fresh = () => ({ ...emptyForm(crypto.randomUUID()), receivedAt: parse(nowText()) ?? undefined })
  const [round, setRound] = useState<Round>(() => ({
    values: { ...fresh(), ...(clientId === '' ? {} : { clientId }) },
    isNext: false,
  }))
  const [received, setReceived] = useState<{ sample: SampleView; sent: ReceiveValues } | null>(null)
  const again = (values: ReceiveValues, isNext: boolean) => {
    setRound({ values, isNext })
    setReceived(null)
  }
  if (received) {
    return (
      <ReceivedPanel
        received={received.sample}
        onNextOfRound={() => again(nextOfRound(received.sent, crypto.randomUUID()), true)}
        onAfresh={() => again(fresh(), false)}
      />
    )
  }
  return (
    <ReceiveForm
      key={round.values.draftId}
      first={round.values}
      isNext={round.isNext}
      onReceived={(sample, sent) => setReceived({ sample, sent })}
    />
  )
}
