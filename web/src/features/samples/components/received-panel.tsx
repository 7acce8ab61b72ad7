import { useQuery } from '@tanstack/react-query'
import { STATE_MARKS } from '@weirlight/shared/states'
import { Button } from 'antd'
import { useEffect, useRef } from 'react'
import { Link } from 'react-router-dom'
import { byClock, paths } from '../../../lib'
import { Box, Clock, Columns, StatusTag } from '../../../ui'
import { sampleQuery, type SampleView } from '../api/sample-queries'
import { isUndecided } from '../sample-words'
import { AcceptanceBox } from './acceptance-box'
import './samples.css'

interface ReceivedPanelProps {
  received: SampleView
  onNextOfRound: () => void
  onAfresh: () => void
}

/** The number, large enough to write on a bottle, and what is left to decide. */
export function ReceivedPanel({ received, onNextOfRound, onAfresh }: ReceivedPanelProps) {
  const query = useQuery({ ...sampleQuery(received.id), initialData: received })
  const sample = query.data
  const heading = useRef<HTMLHeadingElement>(null)
  useEffect(() => heading.current?.focus(), [])
  const [first] = byClock(sample.details, (each) => each.holding.dueAt)
  return (
    <Columns
      side={
        <Box title="Next">
          <div className="stack">
            <Button type={isUndecided(sample) ? 'default' : 'primary'} onClick={onNextOfRound}>
              Receive another from this client
            </Button>
            <Button onClick={onAfresh}>Receive from another client</Button>
            <Link className="button" to={`${paths.labels}?samples=${sample.id}`}>
              Print the label
            </Link>
            <Link className="button" to={paths.sample(sample.id)}>
              Open the sample
            </Link>
          </div>
        </Box>
      }
    >
      <Box>
        <div className="note">Received as</div>
        <h2 className="big-number" ref={heading} tabIndex={-1}>
          {sample.number}
        </h2>
        <p className="row">
          <StatusTag mark={STATE_MARKS.sample[sample.state]} />
          {first && <Clock dueAt={first.holding.dueAt} soonHours={24} what="to be read" />}
        </p>
        <p className="quiet">
          {sample.pointCode} {sample.pointName} · {sample.clientName}
        </p>
      </Box>
      <AcceptanceBox sample={sample} />
    </Columns>
  )
}
