import type { Action } from '@weirlight/shared/permissions'
import { paths, useCan } from '../../lib'
import { SectionNav } from '../../ui'

const SECTIONS: { to: string; title: string; needs: Action }[] = [
  { to: paths.bench, title: 'Readiness', needs: 'methods.read' },
  { to: paths.methods, title: 'Methods', needs: 'methods.read' },
  { to: paths.materials, title: 'Materials', needs: 'materials.read' },
  { to: paths.instruments, title: 'Instruments', needs: 'instruments.read' },
  { to: paths.benchPeople, title: 'People', needs: 'users.read' },
  { to: paths.clients, title: 'Clients', needs: 'clients.read' },
  { to: paths.programmes, title: 'Programmes and limits', needs: 'programmes.read' },
]

/** The pages of the bench, as far as the person may see them. */
export function BenchSections() {
  const may = useCan()
  return <SectionNav label="Bench" sections={SECTIONS.filter((section) => may(section.needs))} />
}
