import { Navigate } from 'react-router-dom'
import { paths, useCan } from '../../lib'

/** The first page of the settings that the person may see. */
export function SettingsPage() {
  const may = useCan()
  return <Navigate to={may('users.read') ? paths.settingsPeople : paths.settingsLaboratory} replace />
}
