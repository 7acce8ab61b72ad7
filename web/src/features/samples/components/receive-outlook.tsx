import { useQueries, useQuery } from '@tanstack/react-query'
import { Form } from 'antd'
import { Box, Clock, KeyValues, StatusTag } from '../../../ui'
import { clientQuery } from '../../clients'
import { approvalMark, methodQuery, recordOf } from '../../methods'
import { programmesQuery } from '../../programmes'
import { approvalOutlook, holdingOutlook } from '../receive/outlook'
import type { ReceiveValues } from '../receive/receive-values'

/** Beside the form: whose limits count, what each determination needs, and how long there is. */
export function ReceiveOutlook() {
  const form = Form.useFormInstance<ReceiveValues>()
  const values = Form.useWatch((all: ReceiveValues) => all, form) ?? {}
  const client = useQuery({ ...clientQuery(values.clientId ?? ''), enabled: !!values.clientId })
  const programmes = useQuery(programmesQuery)
  const wanted = values.determinations ?? []
  const methods = useQueries({ queries: wanted.map(({ methodId }) => methodQuery(methodId)) })
  const programme = programmes.data?.items.find((each) => each.id === client.data?.programmeId)
  return (
    <>
      {client.data && (
        <Box title={client.data.name}>
          <KeyValues
            items={[
              { term: 'Programme', detail: client.data.programmeName },
              client.data.systemId !== '' && { term: 'System number', detail: client.data.systemId },
            ]}
          />
        </Box>
      )}
      <Box title="What these determinations need">
        {wanted.length === 0 ? (
          <p className="note">
            Choose the determinations; what they need and how long there is appears here.
          </p>
        ) : (
          <ul className="plain-list outlook">
            {methods.map((method, index) => {
              if (!method.data) return <li key={index} className="skeleton" />
              const record = recordOf(method.data)
              const dueAt = holdingOutlook(record, values)
              const approval = approvalOutlook({
                record,
                programmeCode: programme?.code,
                purpose: values.purpose,
              })
              return (
                <li key={method.data.id}>
                  <div className="strong">{method.data.title}</div>
                  {dueAt && <Clock dueAt={dueAt} soonHours={24} what="to be read" />}
                  {approval && (
                    <div>
                      <StatusTag mark={approvalMark(approval.status)} />
                      <p className="note">{approval.statement}</p>
                    </div>
                  )}
                  <p className="note">{record.holdTime.text}</p>
                </li>
              )
            })}
          </ul>
        )}
      </Box>
    </>
  )
}
