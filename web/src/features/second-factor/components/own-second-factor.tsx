import { useQuery } from '@tanstack/react-query'
import type { ResponseOf, startSecondFactor } from '@weirlight/shared/contracts'
import { Button } from 'antd'
import { useState } from 'react'
import { useLaboratoryTime } from '../../../lib'
import { Box, Loaded } from '../../../ui'
import { FormDialog } from '../../../ui/form-dialog'
import { secondFactorQuery } from '../api/second-factor-queries'
import { ConfirmDevice } from './confirm-device'
import { RecoveryCodes } from './recovery-codes'
import { GivePassphrase, RemoveSecondFactor } from './second-factor-forms'
import './second-factor.css'

type Secret = ResponseOf<typeof startSecondFactor>
type Asked = 'set-up' | 'remove'

/** Set up in three steps: the passphrase, the device, the recovery codes. Secrets live in this page alone and leave with it. */
export function OwnSecondFactor() {
  const { at } = useLaboratoryTime()
  const query = useQuery(secondFactorQuery)
  const [asked, setAsked] = useState<Asked | null>(null)
  const [secret, setSecret] = useState<Secret | null>(null)
  const [codes, setCodes] = useState<readonly string[] | null>(null)
  const close = () => setAsked(null)
  if (codes) return <RecoveryCodes codes={codes} onKept={() => setCodes(null)} />
  if (secret) {
    return (
      <ConfirmDevice
        secret={secret}
        onCancel={() => setSecret(null)}
        onDone={(recoveryCodes) => {
          setCodes(recoveryCodes)
          setSecret(null)
        }}
      />
    )
  }
  return (
    <Box title="Second factor">
      <p>
        Whoever signs results or calibrations should have one: a passphrase that somebody else learns then
        opens nothing without your device.
      </p>
      <Loaded query={query} skeleton="lines" what="second factor">
        {({ since, recoveryCodesLeft: left }) =>
          since === null ? (
            <div className="stack">
              <p>
                You have none: your passphrase alone signs you in. Any application on your phone that shows
                one-time codes will do.
              </p>
              <div className="row">
                <Button type="primary" onClick={() => setAsked('set-up')}>
                  Set up a second factor
                </Button>
              </div>
            </div>
          ) : (
            <div className="stack">
              <p>
                You have one since {at(since)}.{' '}
                {left === 1 ? '1 recovery code is left.' : `${left} recovery codes are left.`}
                {left < 3 && ' For new ones, take it off and set it up again.'}
              </p>
              <div className="row">
                <Button onClick={() => setAsked('remove')}>Take it off</Button>
              </div>
            </div>
          )
        }
      </Loaded>
      <FormDialog isOpen={asked === 'set-up'} onClose={close} title="Set up a second factor">
        <GivePassphrase
          onCancel={close}
          onDone={(made) => {
            setSecret(made)
            close()
          }}
        />
      </FormDialog>
      <FormDialog isOpen={asked === 'remove'} onClose={close} title="Take off the second factor">
        <RemoveSecondFactor onDone={close} />
      </FormDialog>
    </Box>
  )
}
