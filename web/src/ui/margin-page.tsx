import { Fragment, useId, type ReactNode } from 'react'
import { Link } from 'react-router-dom'
import { useIsNarrow } from '../lib/use-is-narrow'
import { useTitle } from '../lib/use-title'
import { present, type MaybeFact } from './sheet'
import { unbroken } from './unbroken'

interface MarginPageProps {
  title: string
  subtitle?: ReactNode
  back?: { to: string; label: string }
  state?: ReactNode
  facts?: readonly MaybeFact[]
  /** small print below a rule: who is here, cautions of the method */
  notes?: readonly ReactNode[]
  bar?: ReactNode
  /** what the folded margin is called on tablet and phone */
  foldLabel?: string
  children: ReactNode
}

/** A page of the bench book: margin and sheet. The margin folds under the heading on a tablet and a phone. */
export function MarginPage({
  title,
  subtitle,
  back,
  state,
  facts = [],
  notes = [],
  bar,
  foldLabel = 'What this stands on',
  children,
}: MarginPageProps) {
  useTitle(title)
  const isNarrow = useIsNarrow()
  const headingId = useId()
  const shownFacts = present(facts)
  const shownNotes = notes.filter((note) => note !== null && note !== undefined && note !== false)
  const hasMore = shownFacts.length > 0 || shownNotes.length > 0
  const more = (
    <>
      {shownFacts.length > 0 && (
        <dl className="facts">
          {shownFacts.map((fact) => (
            <div key={fact.term}>
              <dt>{fact.term}</dt>
              <dd>{fact.detail}</dd>
            </div>
          ))}
        </dl>
      )}
      {shownNotes.length > 0 && (
        <div className="page-notes">
          {shownNotes.map((note, index) => (
            <div key={index}>{note}</div>
          ))}
        </div>
      )}
    </>
  )
  return (
    <div className="page">
      <section className="page-margin" aria-labelledby={headingId}>
        {back && (
          <Link className="page-back" to={back.to}>
            ← {back.label}
          </Link>
        )}
        <h1 id={headingId}>{unbroken(title)}</h1>
        {subtitle && <div className="page-sub">{subtitle}</div>}
        {state && <div className="page-state">{state}</div>}
        {hasMore &&
          (isNarrow ? (
            <details className="page-fold">
              <summary>{shownFacts.length > 0 ? foldLabel : 'Cautions and notes'}</summary>
              {more}
            </details>
          ) : (
            <Fragment>{more}</Fragment>
          ))}
      </section>
      <section className="page-sheet" aria-label="Work">
        {bar}
        {children}
      </section>
    </div>
  )
}
