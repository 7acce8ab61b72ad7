import { LaboratoryParticulars } from '../../features/laboratory'
import { MarginPage } from '../../ui'
import { SettingsSections } from './settings-sections'

export function LaboratoryPage() {
  return (
    <MarginPage
      title="Laboratory"
      subtitle="What certificates and mails say of it"
      bar={<SettingsSections />}
    >
      <LaboratoryParticulars />
    </MarginPage>
  )
}
