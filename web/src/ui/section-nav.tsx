import { NavLink } from 'react-router-dom'
import './styles/pages.css'

export interface Section {
  to: string
  title: string
}

/** The pages of one area, across the top of its sheet. */
export function SectionNav({ label, sections }: { label: string; sections: readonly Section[] }) {
  if (sections.length < 2) return null
  return (
    <nav className="sections no-print" aria-label={label}>
      {sections.map((section) => (
        <NavLink key={section.to} to={section.to} end>
          {section.title}
        </NavLink>
      ))}
    </nav>
  )
}
