import type { UseQueryResult } from '@tanstack/react-query'
import { useId, type ReactNode } from 'react'
import { Link } from 'react-router-dom'
import { asProblem, type ProblemError } from '../lib/problem-error'
import { paths } from '../lib/paths'
import { MarginPage } from './margin-page'

interface EmptyProps {
  title: string
  children?: ReactNode
  action?: ReactNode
}

export function Empty({ title, children, action }: EmptyProps) {
  return (
    <div className="empty">
      <strong>{title}</strong>
      {children}
      {action && <div className="row">{action}</div>}
    </div>
  )
}

const FAILED_TITLES: Partial<Record<ProblemError['code'], string>> = {
  offline: 'No answer from the laboratory’s server',
  unavailable: 'The server is busy or being started',
  throttled: 'Too many requests in a short time',
}

export function Failed({ problem, retry }: { problem: ProblemError; retry?: () => void }) {
  return (
    <div className="box empty" role="alert">
      <strong>{FAILED_TITLES[problem.code] ?? 'This could not be loaded'}</strong>
      <p>{problem.message}</p>
      {problem.requestId && (
        <p className="note">Request {problem.requestId}; the administrator can find it by this.</p>
      )}
      <div className="row">
        {retry && (
          <button type="button" className="button" onClick={retry}>
            Try again
          </button>
        )}
      </div>
    </div>
  )
}

export function Forbidden() {
  return (
    <Empty
      title="This part of the laboratory is not open to your role"
      action={
        <Link className="button" to={paths.today}>
          Go to Today
        </Link>
      }
    >
      If you need it for your work, ask the administrator.
    </Empty>
  )
}

interface PlaceLink {
  to: string
  label: string
}

interface NotFoundProps {
  /** 'sample': as it stands in “no such …” */
  what?: string
  /** where all of them are listed */
  back?: PlaceLink
  /** the heading of the page says what is missing already */
  isHeaded?: boolean
}

export function NotFound({
  what = 'page',
  back = { to: paths.today, label: 'Today' },
  isHeaded = false,
}: NotFoundProps) {
  return (
    <Empty
      title={isHeaded ? 'Nothing is kept at this address' : `There is no such ${what}`}
      action={
        <Link className="button" to={back.to}>
          Go to {back.label}
        </Link>
      }
    >
      The address may be mistyped, or what it names belongs to somebody else. {back.label} shows what there
      is.
    </Empty>
  )
}

/** A page of one thing that does not exist: what is missing is its heading. */
export function NotFoundPage({ what = 'page', back }: NotFoundProps) {
  return (
    <MarginPage title={`No such ${what}`} {...(back ? { back } : {})}>
      <div className="box">
        <NotFound what={what} isHeaded {...(back ? { back } : {})} />
      </div>
    </MarginPage>
  )
}

/** Grey lines where the text will be; says once, to screen readers, that the page is loading. */
export function SkeletonLines({ lines = 6 }: { lines?: number }) {
  return (
    <div className="stack" role="status" aria-label="Loading">
      {Array.from({ length: lines }, (_, index) => (
        <span
          key={index}
          className="skeleton"
          data-width={index % 3}
          style={{ width: `${90 - (index % 4) * 14}%` }}
        />
      ))}
    </div>
  )
}

export function SkeletonPage({ back }: { back?: PlaceLink | undefined }) {
  return (
    <div className="page" aria-busy="true">
      <div className="page-margin">
        {back && (
          <Link className="page-back" to={back.to}>
            ← {back.label}
          </Link>
        )}
        <SkeletonLines lines={4} />
      </div>
      <div className="page-sheet">
        <div className="box">
          <SkeletonLines lines={8} />
        </div>
      </div>
    </div>
  )
}

interface LoadedProps<T> {
  query: UseQueryResult<T, Error>
  children: (data: T) => ReactNode
  /** how much of the page is waiting */
  skeleton?: 'page' | 'lines'
  /** the thing, for “there is no such …” */
  what?: string
  /** where all of them are listed: the way out of a page that has nothing to show */
  back?: PlaceLink
}

/** Nothing is there, or the address cannot be that of anything: for a person it is the same. */
const isMissing = (problem: ProblemError) =>
  problem.code === 'not-found' || problem.errors.some((each) => each.path === 'id')

/** Draws its children once the data is there; until then, or instead, the state that fits. */
export function Loaded<T>({ query, children, skeleton = 'lines', what, back }: LoadedProps<T>) {
  if (query.data !== undefined) return children(query.data)
  if (!query.isError) return skeleton === 'page' ? <SkeletonPage back={back} /> : <SkeletonLines />
  const problem = asProblem(query.error)
  const given = { ...(what ? { what } : {}), ...(back ? { back } : {}) }
  const isWhole = skeleton === 'page'
  if (isMissing(problem)) return isWhole ? <NotFoundPage {...given} /> : <NotFound {...given} />
  const isForbidden = problem.code === 'forbidden'
  const state = isForbidden ? <Forbidden /> : <Failed problem={problem} retry={() => void query.refetch()} />
  if (!isWhole) return state
  return (
    <MarginPage
      title={isForbidden ? 'Not open to your role' : `The ${what ?? 'page'} could not be loaded`}
      {...(back ? { back } : {})}
    >
      {isForbidden ? <div className="box">{state}</div> : state}
    </MarginPage>
  )
}

/** For what takes longer than two seconds: how far it is, in numbers. */
export function Progress({ done, of, label }: { done: number; of: number; label: string }) {
  const id = useId()
  return (
    <div className="progress">
      <label htmlFor={id}>
        {label}: {done} of {of}
      </label>
      <progress id={id} value={done} max={of} />
    </div>
  )
}
