import { useState } from 'react'
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
  const [round, setRound] = useState<Round>(() => ({
    values: { ...emptyForm(crypto.randomUUID()), ...(clientId === '' ? {} : { clientId }) },
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
        onAfresh={() => again(emptyForm(crypto.randomUUID()), false)}
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
