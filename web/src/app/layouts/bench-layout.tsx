import { useQuery } from '@tanstack/react-query'
import { Fragment, useEffect, useRef, type ReactNode } from 'react'
import { Link, NavLink, useLocation } from 'react-router-dom'
import { todayQuery } from '../../features/today'
import { paths } from '../../lib/paths'
import { useCan } from '../../lib/session'
import { WeirMark } from '../../ui/weir-mark'
import { AREAS, type Area } from '../areas'
import { GoBox } from './go-box'
import { PersonMenu } from './person-menu'

/** The laboratory's own layout: the way of the water across the top. */
export function BenchLayout({ children }: { children: ReactNode }) {
  const may = useCan()
  const today = useQuery(todayQuery)
  const counts = today.data?.counts
  const way = useRef<HTMLElement>(null)
  const { pathname } = useLocation()
  useEffect(() => {
    // on a phone the way is longer than the screen: show where we are, also once the counts have made room
    const nav = way.current
    const here = nav?.querySelector<HTMLElement>('[aria-current="page"]')
    if (!nav || !here) return
    nav.scrollLeft = here.offsetLeft - nav.offsetLeft - (nav.clientWidth - here.offsetWidth) / 2
  }, [pathname, counts])
  const shown = AREAS.filter((area) => area.routes.length > 0 && may(area.needs))
  return (
    <>
      <a className="skip" href="#work">
        Go to the work
      </a>
      <header className="top">
        <Link to={paths.today} aria-label="Weirlight, Today">
          <WeirMark isSmall />
        </Link>
        <nav className="way" ref={way} aria-label="The work">
          <NavLink to={paths.today}>Today</NavLink>
          {shown.map((area, index) => (
            <Fragment key={area.to}>
              {(index === 0 || area.opensGroup) && <span className="way-gap" aria-hidden="true" />}
              <NavLink to={area.to}>
                {area.title}
                <AreaCount area={area} count={area.count ? (counts?.[area.count] ?? 0) : 0} />
              </NavLink>
            </Fragment>
          ))}
        </nav>
        <div className="top-right">
          {may('search.go') && <GoBox />}
          <PersonMenu />
        </div>
      </header>
      <Work>{children}</Work>
    </>
  )
}

function AreaCount({ area, count }: { area: Area; count: number }) {
  if (count === 0) return null
  return (
    <span className={area.isHot ? 'count hot' : 'count'}>
      {count}
      <span className="visually-hidden"> waiting</span>
    </span>
  )
}

/** After a move the reading place is the new page, for keyboards and screen readers alike. */
export function Work({ children }: { children: ReactNode }) {
  const { pathname } = useLocation()
  const main = useRef<HTMLElement>(null)
  const last = useRef(pathname)
  useEffect(() => {
    if (last.current === pathname) return
    last.current = pathname
    const isElsewhere = !main.current?.contains(document.activeElement)
    if (isElsewhere) main.current?.focus({ preventScroll: true })
  }, [pathname])
  return (
    <main id="work" ref={main} tabIndex={-1} className="work">
      {children}
    </main>
  )
}
