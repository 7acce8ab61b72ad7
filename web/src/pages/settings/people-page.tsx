import { Button } from 'antd'
import { useState } from 'react'
import { InvitePerson, PeopleList } from '../../features/users'
import { useCan } from '../../lib'
import { Bar, MarginPage } from '../../ui'
import { FormDialog } from '../../ui/form-dialog'
import { SettingsSections } from './settings-sections'

export function PeoplePage() {
  const may = useCan()
  const [isInviting, setInviting] = useState(false)
  return (
    <MarginPage
      title="People"
      subtitle="Everyone with an account"
      notes={[
        'One account a person, never shared: the record names who did what.',
        'An account that is not needed any more is disabled, never deleted.',
      ]}
      bar={
        <>
          <SettingsSections />
          {may('users.manage') && (
            <Bar
              actions={
                <Button type="primary" onClick={() => setInviting(true)}>
                  Invite a person
                </Button>
              }
            />
          )}
        </>
      }
    >
      <PeopleList />
      <FormDialog isOpen={isInviting} onClose={() => setInviting(false)} title="Invite a person">
        <InvitePerson onDone={() => setInviting(false)} />
      </FormDialog>
    </MarginPage>
  )
}
