import { useQuery } from '@tanstack/react-query'
import { Form, Select } from 'antd'
import { Box } from '../../../ui'
import { clientQuery, clientsQuery } from '../../clients'

interface WhereFromProps {
  isNext: boolean
  moveOn: () => void
}

/** Client and point, found by code or name: typed, scanned or looked for. */
export function WhereFrom({ isNext, moveOn }: WhereFromProps) {
  const form = Form.useFormInstance()
  const clientId = Form.useWatch<string | undefined>('clientId', form) ?? ''
  const clients = useQuery(clientsQuery)
  const client = useQuery({ ...clientQuery(clientId), enabled: clientId !== '' })
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
            onSelect={moveOn}
          />
        </Form.Item>
        <Form.Item name="pointId" label="Sampling point" required>
          <Select
            showSearch={{ optionFilterProp: 'label' }}
            autoFocus={isNext || clientId !== ''}
            placeholder={clientId === '' ? 'Choose the client first' : 'Code or name'}
            disabled={clientId === ''}
            loading={clientId !== '' && client.isPending}
            notFoundContent="No point of this name"
            options={(client.data?.points ?? [])
              .filter((point) => point.active)
              .map((point) => ({ value: point.id, label: `${point.code} · ${point.name}` }))}
            onSelect={moveOn}
          />
        </Form.Item>
      </div>
    </Box>
  )
}
