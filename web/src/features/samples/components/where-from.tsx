import { useQuery } from '@tanstack/react-query'
import { Form, Select, type RefSelectProps } from 'antd'
import { useEffect, useRef, useState } from 'react'
import { Box } from '../../../ui'
import { clientQuery, clientsQuery, type SamplingPoint } from '../../clients'

interface WhereFromProps {
  isNext: boolean
  moveOn: () => void
}

/** Client and point, found by code or name: typed, scanned or looked for. */
export function WhereFrom({ isNext, moveOn }: WhereFromProps) {
  const form = Form.useFormInstance()
  // the first time it is drawn the form knows already what the watch does not
  const watched = Form.useWatch<string | undefined>('clientId', form)
  const clientId = watched ?? (form.getFieldValue('clientId') as string | undefined) ?? ''
  const clients = useQuery(clientsQuery)
  const client = useQuery({ ...clientQuery(clientId), enabled: clientId !== '' })
  const point = useRef<RefSelectProps>(null)
  const [justChosen, setJustChosen] = useState('')
  useEffect(() => {
    // the point can only be chosen once its client is drawn
    if (justChosen !== '' && justChosen === clientId) point.current?.focus()
  }, [justChosen, clientId])
  const points = (client.data?.points ?? []).filter((each) => each.active)
  return (
    <Box title="Where it comes from">
      <div className="form-grid">
        <Form.Item name="clientId" label="Client" required>
          <Select
            showSearch={{ optionFilterProp: 'label' }}
            autoFocus={!isNext && clientId === ''}
            placeholder="Code or name"
            loading={clients.isPending}
            notFoundContent="No client of this name"
            options={(clients.data?.items ?? [])
              .filter((each) => each.active)
              .map((each) => ({ value: each.id, label: `${each.code} · ${each.name}` }))}
            onChange={() => form.setFieldsValue({ pointId: undefined })}
            onSelect={(id: string) => setJustChosen(id)}
          />
        </Form.Item>
        <Form.Item name="pointId" label="Sampling point" required>
          <PointSelect
            ref={point}
            points={points}
            hasClient={clientId !== ''}
            isLoading={clientId !== '' && client.isPending}
            autoFocus={isNext || clientId !== ''}
            moveOn={moveOn}
          />
        </Form.Item>
      </div>
    </Box>
  )
}

interface PointSelectProps {
  ref: React.Ref<RefSelectProps>
  points: readonly SamplingPoint[]
  hasClient: boolean
  isLoading: boolean
  autoFocus: boolean
  moveOn: () => void
  value?: string
  onChange?: (value: string) => void
  id?: string
}

/** A scanner is faster than the list: a code that was read before the points are there is chosen once they are. */
function PointSelect(props: PointSelectProps) {
  const { points, hasClient, isLoading, moveOn, value, onChange } = props
  const early = useRef('')
  useEffect(() => {
    if (isLoading || early.current === '') return
    const found = points.find((each) => each.code.toLowerCase() === early.current)
    early.current = ''
    if (!found) return
    onChange?.(found.id)
    moveOn()
    // when the list has come, and then only
    // eslint-disable-next-line react-hooks/exhaustive-deps
  }, [isLoading, points.length])
  return (
    <Select
      ref={props.ref}
      {...(props.id ? { id: props.id } : {})}
      value={value ?? null}
      showSearch={{
        optionFilterProp: 'label',
        onSearch: (text) => {
          // what is typed is emptied by Enter; what was read stays
          if (isLoading && text.trim() !== '') early.current = text.trim().toLowerCase()
        },
      }}
      autoFocus={props.autoFocus}
      placeholder={hasClient ? 'Code or name' : 'Choose the client first'}
      disabled={!hasClient}
      loading={isLoading}
      notFoundContent={isLoading ? 'Points are being read' : 'No point of this name'}
      options={points.map((point) => ({ value: point.id, label: `${point.code} · ${point.name}` }))}
      onChange={(id: string) => onChange?.(id)}
      onSelect={moveOn}
    />
  )
}
