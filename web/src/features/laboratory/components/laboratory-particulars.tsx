import { useQuery } from '@tanstack/react-query'
import {
  changeLaboratory,
  getLaboratory,
  getSession,
  type BodyInput,
  type ResponseOf,
} from '@weirlight/shared/contracts'
import { Button, Form, Input } from 'antd'
import { queryFor, useCan, useNotice } from '../../../lib'
import { useEndpointForm } from '../../../lib/use-endpoint-form'
import { Box, KeyValues, Loaded } from '../../../ui'
import { FormProblem } from '../../../ui/form-problem'

type Laboratory = ResponseOf<typeof getLaboratory>
type Values = Omit<BodyInput<typeof changeLaboratory>, 'version'>

/** What certificates and mails say of the laboratory. */
export function LaboratoryParticulars() {
  const may = useCan()
  return (
    <Loaded query={useQuery(queryFor(getLaboratory))}>
      {(laboratory) =>
        may('laboratory.manage') ? (
          <LaboratoryForm laboratory={laboratory} />
        ) : (
          <Box title="The laboratory">
            <KeyValues
              items={[
                { term: 'Name', detail: laboratory.name },
                { term: 'Address', detail: laboratory.address },
                { term: 'Accreditation', detail: laboratory.accreditation },
                { term: 'E-mail', detail: laboratory.email },
                { term: 'Telephone', detail: laboratory.phone },
                { term: 'Time zone', detail: laboratory.timeZone },
              ]}
            />
          </Box>
        )
      }
    </Loaded>
  )
}

function LaboratoryForm({ laboratory }: { laboratory: Laboratory }) {
  const notice = useNotice()
  const form = useEndpointForm<typeof changeLaboratory, Values>({
    endpoint: changeLaboratory,
    toInput: (values) => ({ body: { ...values, version: laboratory.version } }),
    invalidates: [getLaboratory, getSession],
    basedOn: laboratory.version,
    onDone: () => notice.done('Changed. Certificates issued from now on carry it.'),
  })
  return (
    <Form layout="vertical" initialValues={laboratory} {...form.formProps}>
      <FormProblem form={form} />
      <Box title="The laboratory">
        <div className="form-grid">
          <Form.Item name="name" label="Name" required className="wide">
            <Input autoComplete="off" />
          </Form.Item>
          <Form.Item name="address" label="Address" required className="wide">
            <Input.TextArea autoSize={{ minRows: 1, maxRows: 4 }} />
          </Form.Item>
          <Form.Item
            name="accreditation"
            label="Accreditation"
            required
            extra="Its number, as on certificates."
          >
            <Input autoComplete="off" />
          </Form.Item>
          <Form.Item name="email" label="E-mail" required extra="Answers to mails go there.">
            <Input autoComplete="off" inputMode="email" />
          </Form.Item>
          <Form.Item name="phone" label="Telephone" required>
            <Input autoComplete="off" inputMode="tel" />
          </Form.Item>
        </div>
        <p className="note">
          Time zone {laboratory.timeZone}: chosen when the laboratory was set up, and not changed, because
          every time in the record is shown in it.
        </p>
        <div className="row box-foot">
          <Button type="primary" htmlType="submit" loading={form.isBusy} disabled={!form.isDirty}>
            Change it
          </Button>
          <span className="note">Certificates already issued stay as they are.</span>
        </div>
      </Box>
    </Form>
  )
}
