import { useEffect, useRef } from 'react'
import { NavLink, useLocation } from 'react-router-dom'
import './styles/pages.css'

export interface Section {
  to: string
  title: string
}

/** The pages of one area, across the top of its sheet. */
export function SectionNav({ label, sections }: { label: string; sections: readonly Section[] }) {
  const nav = useRef<HTMLElement>(null)
  const { pathname } = useLocation()
  useEffect(() => {
    // on a phone the line is longer than the screen: show where we are
    const here = nav.current?.querySelector('[aria-current="page"]')
    here?.scrollIntoView({ block: 'nearest', inline: 'center' })
  }, [pathname])
  if (sections.length < 2) return null
  return (
    <nav ref={nav} className="sections no-print" aria-label={label}>
      {sections.map((section) => (
        <NavLink key={section.to} to={section.to} end>
          {section.title}
        </NavLink>
      ))}
    </nav>
  )
}
