import { HealthBox } from '../../features/health'
import { MarginPage } from '../../ui'
import { SettingsSections } from './settings-sections'

export function HealthPage() {
  return (
    <MarginPage title="Health" subtitle="Whether every part answers" bar={<SettingsSections />}>
      <HealthBox />
    </MarginPage>
  )
}
