import type { Action } from '@weirlight/shared/permissions'
import { paths, useCan } from '../../lib'
import { SectionNav } from '../../ui'

export const SETTINGS: { to: string; title: string; needs: Action }[] = [
  { to: paths.settingsPeople, title: 'People', needs: 'users.read' },
  { to: paths.settingsLaboratory, title: 'Laboratory', needs: 'laboratory.read' },
  { to: paths.settingsMail, title: 'Mail', needs: 'mail.read' },
  { to: paths.settingsHealth, title: 'Health', needs: 'laboratory.read' },
  { to: paths.settingsValidation, title: 'Validation', needs: 'validation.read' },
]

/** The pages of the settings, as far as the person may see them. */
export function SettingsSections() {
  const may = useCan()
  return <SectionNav label="Settings" sections={SETTINGS.filter((section) => may(section.needs))} />
}
