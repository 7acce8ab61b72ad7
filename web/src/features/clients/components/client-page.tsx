import { useQuery } from '@tanstack/react-query'
import { Button } from 'antd'
import { useState } from 'react'
import { Link } from 'react-router-dom'
import { paths, useCan } from '../../../lib'
import { Bar, Loaded, MarginPage, StatusTag, Strip } from '../../../ui'
import { FormDialog } from '../../../ui/form-dialog'
import { clientQuery, type ClientView } from '../api/client-queries'
import { activeMark } from '../client-words'
import { ChangeClient } from './client-form'
import { ContactsBox } from './contacts-box'
import { PointsBox } from './points-box'

const LIST = { to: paths.clients, label: 'Clients' }

export function ClientById({ id }: { id: string }) {
  return (
    <Loaded query={useQuery(clientQuery(id))} skeleton="page" what="client" back={LIST}>
      {(client) => <ClientPage client={client} />}
    </Loaded>
  )
}

function ClientPage({ client }: { client: ClientView }) {
  const may = useCan()
  const [isChanging, setChanging] = useState(false)
  const hasAlertContact = client.contacts.some((contact) => contact.getsAlerts)
  return (
    <MarginPage
      title={client.name}
      subtitle={`Client ${client.code}`}
      back={LIST}
      state={<StatusTag mark={activeMark(client)} />}
      foldLabel="Programme and agency"
      facts={[
        {
          term: 'Programme',
          detail: <Link to={paths.programmes}>{client.programmeName}</Link>,
        },
        client.systemId !== '' && { term: 'System number', detail: client.systemId },
        { term: 'Address', detail: client.address },
        { term: 'Agency', detail: client.agencyName },
        { term: 'Agency’s telephone', detail: client.agencyPhone },
        may('history.read') && {
          term: 'History',
          detail: <Link to={`${paths.history}?thing=clients&thingId=${client.id}`}>Every change</Link>,
        },
      ]}
      notes={['The agency decides on compliance. A result above a limit is a laboratory finding.']}
      bar={
        <Bar
          lead={
            may('samples.read') && (
              <Link to={`${paths.receiving}?clientId=${client.id}`}>Samples of this client</Link>
            )
          }
          actions={
            <>
              {may('samples.receive') && (
                <Link className="button" to={`${paths.receive}?client=${client.id}`}>
                  Receive a sample
                </Link>
              )}
              {may('clients.manage') && <Button onClick={() => setChanging(true)}>Change particulars</Button>}
            </>
          }
        />
      }
    >
      {!hasAlertContact && (
        <Strip tone="above" title="Nobody is told of alerts">
          A result above a limit would be mailed to no one at this client. Add a contact who gets alerts.
        </Strip>
      )}
      <div className="stack">
        <PointsBox client={client} />
        <ContactsBox client={client} />
      </div>
      <FormDialog isOpen={isChanging} onClose={() => setChanging(false)} title={`Change ${client.name}`}>
        <ChangeClient client={client} onDone={() => setChanging(false)} />
      </FormDialog>
    </MarginPage>
  )
}
