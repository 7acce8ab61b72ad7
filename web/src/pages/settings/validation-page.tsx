import { ValidationRuns } from '../../features/validation'
import { MarginPage } from '../../ui'
import { SettingsSections } from './settings-sections'

export function ValidationPage() {
  return (
    <MarginPage
      title="Validation"
      subtitle="The calculations against published cases"
      notes={[
        'A laboratory validates its information system before it is used, and after every change. This report is evidence for the calculations.',
        'A case that fails is a reason not to release results until it is understood.',
      ]}
      bar={<SettingsSections />}
    >
      <ValidationRuns />
    </MarginPage>
  )
}
