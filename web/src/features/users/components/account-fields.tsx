import { useQuery } from '@tanstack/react-query'
import { ROLE_NAMES, ROLES, type Role } from '@weirlight/shared/permissions'
import { Form, Input } from 'antd'
import { SelectInput } from '../../../ui'
import { utilitiesQuery } from '../api/user-queries'
import { ROLE_HINTS } from '../user-words'

export interface AccountValues {
  name: string
  role: Role
  clientId: string | null
}

/** the body of an account; only clients belong to a utility */
export const accountOf = (values: Partial<AccountValues>) => ({
  name: values.name ?? '',
  role: values.role as Role,
  clientId: values.role === 'client' ? (values.clientId ?? null) : null,
})

export function AccountFields() {
  const role = Form.useWatch<Role | undefined>('role')
  const utilities = useQuery(utilitiesQuery)
  return (
    <>
      <Form.Item name="name" label="Name" required>
        <Input autoComplete="off" />
      </Form.Item>
      <Form.Item name="role" label="Role" required extra={role ? ROLE_HINTS[role] : undefined}>
        <SelectInput options={ROLES.map((value) => ({ value, label: ROLE_NAMES[value] }))} />
      </Form.Item>
      {role === 'client' && (
        <Form.Item name="clientId" label="Utility" required>
          <SelectInput
            options={(utilities.data?.items ?? []).map((each) => ({ value: each.id, label: each.name }))}
          />
        </Form.Item>
      )}
    </>
  )
}
