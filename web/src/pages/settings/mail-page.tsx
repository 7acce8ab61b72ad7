import { MailList } from '../../features/mail'
import { MarginPage } from '../../ui'
import { SettingsSections } from './settings-sections'

export function MailPage() {
  return (
    <MarginPage
      title="Mail"
      subtitle="Messages that left or should leave"
      notes={[
        'A message that is refused is tried again by itself, at longer and longer intervals; after the last try it stays here until somebody tries it again.',
      ]}
      bar={<SettingsSections />}
    >
      <MailList />
    </MarginPage>
  )
}
