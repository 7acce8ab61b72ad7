import { Fragment, type ReactNode } from 'react'
import { MarkShape, type Mark } from './status-tag'

interface BoxProps {
  title?: ReactNode
  children: ReactNode
  /** no padding: the content brings its own */
  isFlush?: boolean
}

/** A ruled box on the sheet. */
export function Box({ title, children, isFlush = false }: BoxProps) {
  return (
    <section className={isFlush ? 'box flush' : 'box'}>
      {title && <h2>{title}</h2>}
      {children}
    </section>
  )
}

/** The work on the left, what explains it on the right; below each other on a phone. */
export function Columns({ children, side }: { children: ReactNode; side: ReactNode }) {
  return (
    <div className="columns">
      <div>{children}</div>
      <div>{side}</div>
    </div>
  )
}

interface StripProps {
  tone?: 'caution' | 'above' | 'quiet'
  title?: ReactNode
  children: ReactNode
  action?: ReactNode
  /** said aloud by screen readers when it appears */
  isAlert?: boolean
}

/** One notice across the sheet: a shape, a word, a sentence, and what to do. */
export function Strip({ tone = 'caution', title, children, action, isAlert = false }: StripProps) {
  return (
    <div className={`strip is-${tone}`} role={isAlert ? 'alert' : undefined}>
      <span className={`state is-${tone}`}>
        <MarkShape shape={tone === 'quiet' ? 'ring' : 'triangle'} />
        {title ?? <span className="visually-hidden">{tone === 'quiet' ? 'Note' : 'Caution'}</span>}
      </span>
      <div className="strip-text">{children}</div>
      {action}
    </div>
  )
}

/** What is said on the left, what can be done on the right, above the sheet. */
export function Bar({ lead, actions }: { lead?: ReactNode; actions?: ReactNode }) {
  return (
    <div className="bar">
      <div className="bar-lead">{lead}</div>
      {actions && <div className="bar-actions no-print">{actions}</div>}
    </div>
  )
}

export interface Fact {
  term: string
  detail: ReactNode
}
export type MaybeFact = Fact | false | '' | null | undefined

export const present = (facts: readonly MaybeFact[]): Fact[] => facts.filter((fact) => !!fact)

export function KeyValues({ items }: { items: readonly MaybeFact[] }) {
  return (
    <dl className="key-values">
      {present(items).map((item) => (
        <div key={item.term}>
          <dt>{item.term}</dt>
          <dd>{item.detail}</dd>
        </div>
      ))}
    </dl>
  )
}

const OUTCOMES = {
  pass: { word: 'met', shape: 'disc', tone: 'meets' },
  fail: { word: 'not met', shape: 'triangle', tone: 'above' },
  warn: { word: 'caution', shape: 'diamond', tone: 'caution' },
  'not-judged': { word: 'not judged', shape: 'ring', tone: 'quiet' },
} as const satisfies Record<string, Mark>

interface CriteriaProps {
  items: readonly { what: ReactNode; found: ReactNode; outcome: keyof typeof OUTCOMES }[]
}

/** The criteria of a method, each with what was found. */
export function Criteria({ items }: CriteriaProps) {
  return (
    <ul className="check-list">
      {items.map((item, index) => {
        const mark = OUTCOMES[item.outcome]
        return (
          <li key={index}>
            <span className={`state is-${mark.tone}`}>
              <MarkShape shape={mark.shape} />
              <span className="visually-hidden">{mark.word}:</span>
            </span>
            <span>{item.what}</span>
            <span className={item.outcome === 'fail' ? 'above' : 'quiet'}>
              {item.found}
              {item.outcome === 'fail' && ', not met'}
            </span>
          </li>
        )
      })}
    </ul>
  )
}

export function Kbd({ children }: { children: ReactNode }) {
  return <kbd className="kbd">{children}</kbd>
}

/** Keys and what they do, one line under a grid. */
export function KeyHints({ hints }: { hints: readonly [key: string, does: string][] }) {
  return (
    <p className="note no-print">
      {hints.map(([key, does], index) => (
        <Fragment key={key}>
          {index > 0 && ' · '}
          <Kbd>{key}</Kbd> {does}
        </Fragment>
      ))}
    </p>
  )
}
