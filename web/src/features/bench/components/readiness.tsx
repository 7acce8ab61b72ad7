import { useQuery } from '@tanstack/react-query'
import { getReadiness, type ResponseOf } from '@weirlight/shared/contracts'
import { Link } from 'react-router-dom'
import { paths, queryFor, useCan, useLaboratoryTime } from '../../../lib'
import { Box, Empty, Loaded, MarkShape, StatusTag, unbroken } from '../../../ui'
import './bench.css'

type Method = ResponseOf<typeof getReadiness>['methods'][number]
type Line = Method['lines'][number]

export const readinessQuery = queryFor(getReadiness)

const READY = { word: 'Work may start', shape: 'disc', tone: 'meets' } as const
const NOT_READY = { word: 'Work may not start', shape: 'triangle', tone: 'above' } as const

/** For each method: whether work may start, and if not, everything that stands in the way. */
export function Readiness() {
  return (
    <Loaded query={useQuery(readinessQuery)}>
      {({ methods }) =>
        methods.length === 0 ? (
          <Empty title="No method is in use">An administrator loads the catalogue of methods.</Empty>
        ) : (
          <div className="readiness">
            {methods
              .toSorted((a, b) => Number(a.ready) - Number(b.ready))
              .map((method) => (
                <MethodBox key={method.methodId} method={method} />
              ))}
          </div>
        )
      }
    </Loaded>
  )
}

function MethodBox({ method }: { method: Method }) {
  const may = useCan()
  const stopping = method.lines.filter((line) => !line.ready)
  return (
    <Box title={<Link to={paths.method(method.methodId)}>{method.title}</Link>}>
      <p>
        <StatusTag mark={method.ready ? READY : NOT_READY}>
          {method.ready ? READY.word : `${NOT_READY.word}: ${reasons(stopping)}`}
        </StatusTag>
      </p>
      <ul className="check-list readiness-lines">
        {method.lines.map((line, index) => (
          <ReadinessLine key={index} line={line} />
        ))}
      </ul>
      {may('batches.run') && method.ready && (
        <p className="box-foot">
          <Link to={`${paths.newBatch}?method=${method.methodId}`}>Make a batch</Link>
        </p>
      )}
    </Box>
  )
}

function reasons(lines: readonly Line[]): string {
  const names = [...new Set(lines.map((line) => line.what.toLowerCase()))]
  if (names.length < 2) return names.join('')
  return `${names.slice(0, -1).join(', ')} and ${names.at(-1) ?? ''}`
}

function ReadinessLine({ line }: { line: Line }) {
  const may = useCan()
  const isOpen = line.to !== null && mayOpen(line.to, may)
  return (
    <li>
      <span className={`state is-${line.ready ? 'meets' : 'above'}`}>
        <MarkShape shape={line.ready ? 'disc' : 'triangle'} />
        <span className="visually-hidden">{line.ready ? 'ready' : 'stands in the way'}:</span>
      </span>
      <span>
        <span className="quiet">{line.what}.</span>{' '}
        {isOpen && line.to ? <Link to={line.to}>{unbroken(line.why)}</Link> : unbroken(line.why)}
      </span>
      <span className="note">
        <Until dueAt={line.dueAt} />
      </span>
    </li>
  )
}

/** A day or a moment, as the server has it. */
function Until({ dueAt }: { dueAt: string | null }) {
  const { day } = useLaboratoryTime()
  if (dueAt === null) return null
  return <>to {dueAt.includes('T') ? day(dueAt) : dueAt}</>
}

/** What the person's role may not open stays a sentence. */
function mayOpen(to: string, may: ReturnType<typeof useCan>): boolean {
  if (to === paths.newCalibration) return may('calibrations.prepare')
  if (to.startsWith(paths.calibrations)) return may('calibrations.read')
  if (to.startsWith(paths.instruments)) return may('instruments.read')
  if (to.startsWith(paths.materials)) return may('materials.read')
  if (to.startsWith(paths.benchPeople)) return may('users.read')
  return true
}
