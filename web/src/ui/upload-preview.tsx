import { LIMITS } from '@weirlight/shared/limits'
import { useId, useRef, useState, type ReactNode } from 'react'
import { asProblem, type ProblemError } from '../lib/problem-error'
import { Progress } from './page-states'
import { Bar, Strip } from './sheet'
import { StatusTag } from './status-tag'

export interface PreviewRow {
  /** the line of the file, as a spreadsheet counts it */
  line: number
  cells: readonly string[]
  problems: readonly { column: string; message: string }[]
}

export interface Preview {
  columns: readonly string[]
  rows: readonly PreviewRow[]
  summary?: ReactNode
}

interface UploadPreviewProps<P extends Preview> {
  /** e.g. `.xlsx,.csv` */
  accept: string
  /** what the file holds, in the plural: “readings” */
  what: string
  preview: (file: File, onProgress: (share: number) => void) => Promise<P>
  apply: (preview: P) => Promise<unknown>
  applyLabel: string | ((preview: P) => string)
  /** a file to fill in */
  template?: { href: string; label: string }
  /** something to say or ask before it is applied */
  children?: (preview: P) => ReactNode
}

const GOOD = { word: 'will be entered', shape: 'disc', tone: 'meets' } as const
const BAD = { word: 'bad row', shape: 'triangle', tone: 'above' } as const
const megabytes = (bytes: number) => `${Math.round((bytes / 1024 / 1024) * 10) / 10} MB`

/** A file is read on the server first; every row is shown as it would be entered, every bad one named; then it is applied whole. */
export function UploadPreview<P extends Preview>(props: UploadPreviewProps<P>) {
  const { accept, what, preview: read, apply, applyLabel, template } = props
  const input = useRef<HTMLInputElement>(null)
  const inputId = useId()
  const [isOver, setOver] = useState(false)
  const [share, setShare] = useState<number | null>(null)
  const [found, setFound] = useState<{ preview: P; fileName: string } | null>(null)
  const [problem, setProblem] = useState<ProblemError | null>(null)
  const [sentence, setSentence] = useState<string | null>(null)
  const [isApplying, setApplying] = useState(false)

  const take = async (file: File | undefined) => {
    setProblem(null)
    setSentence(null)
    setFound(null)
    if (!file) return
    if (file.size === 0) return setSentence(`“${file.name}” is empty.`)
    if (file.size > LIMITS.uploadBytes) {
      return setSentence(
        `“${file.name}” has ${megabytes(file.size)}; at most ${megabytes(LIMITS.uploadBytes)} can be loaded.`,
      )
    }
    setShare(0)
    try {
      setFound({ preview: await read(file, setShare), fileName: file.name })
    } catch (error) {
      setProblem(asProblem(error))
    } finally {
      setShare(null)
      // the same file, mended, can be chosen again
      if (input.current) input.current.value = ''
    }
  }

  const enter = async () => {
    if (!found || isApplying) return
    setApplying(true)
    setProblem(null)
    try {
      await apply(found.preview)
    } catch (error) {
      setProblem(asProblem(error))
    } finally {
      setApplying(false)
    }
  }

  return (
    <div className="stack">
      {(problem || sentence) && (
        <Strip tone="above" isAlert>
          {sentence ?? problem?.message}
          {problem && problem.errors.length > 0 && (
            <ul>
              {problem.errors.map((each) => (
                <li key={each.path}>{each.message}</li>
              ))}
            </ul>
          )}
        </Strip>
      )}
      <div
        className={isOver ? 'drop is-over' : 'drop'}
        onDragOver={(event) => {
          event.preventDefault()
          setOver(true)
        }}
        onDragLeave={() => setOver(false)}
        onDrop={(event) => {
          event.preventDefault()
          setOver(false)
          void take(event.dataTransfer.files[0])
        }}
      >
        <label htmlFor={inputId}>
          {found ? 'Choose another file' : `Choose or drop a file of ${what}`} (
          {accept.split(',').join(' or ')})
        </label>
        <input
          id={inputId}
          ref={input}
          type="file"
          accept={accept}
          onChange={(event) => void take(event.target.files?.[0])}
        />
        {template && (
          <a className="note" href={template.href} download>
            {template.label}
          </a>
        )}
        {share !== null && (
          <Progress done={Math.round(share * 100)} of={100} label="Reading the file, per cent" />
        )}
      </div>
      {found && (
        <>
          <Found preview={found.preview} fileName={found.fileName} what={what} />
          {props.children?.(found.preview)}
          <div className="row">
            <button
              type="button"
              className="button main"
              disabled={isApplying || !canApply(found.preview)}
              onClick={() => void enter()}
            >
              {isApplying
                ? 'Being entered…'
                : typeof applyLabel === 'string'
                  ? applyLabel
                  : applyLabel(found.preview)}
            </button>
          </div>
        </>
      )}
    </div>
  )
}

/** All or none: a file with a bad row enters nothing. */
function canApply(preview: Preview): boolean {
  return preview.rows.length > 0 && preview.rows.every((row) => row.problems.length === 0)
}

function Found({ preview, fileName, what }: { preview: Preview; fileName: string; what: string }) {
  const bad = preview.rows.filter((row) => row.problems.length > 0)
  return (
    <>
      <Bar
        lead={
          <>
            <span className="strong">{fileName}</span> · {preview.rows.length - bad.length} good rows,{' '}
            {bad.length} bad
            {preview.summary && <> · {preview.summary}</>}
          </>
        }
      />
      {bad.length > 0 && (
        <Strip tone="above" title={`${bad.length} of ${preview.rows.length} rows are bad`}>
          Nothing has been entered yet. Mend the rows named below in the file and load it again.
        </Strip>
      )}
      <div className="table-wrap" tabIndex={0} role="region" aria-label={`Preview of ${what}`}>
        <table className="table">
          <thead>
            <tr>
              <th scope="col" className="n narrow">
                Row
              </th>
              {preview.columns.map((column) => (
                <th key={column} scope="col">
                  {column}
                </th>
              ))}
              <th scope="col">Finding</th>
            </tr>
          </thead>
          <tbody>
            {preview.rows.map((row) => (
              <tr key={row.line}>
                <td className="n">{row.line}</td>
                {preview.columns.map((column, index) => (
                  <td
                    key={column}
                    className={row.problems.some((each) => each.column === column) ? 'above' : undefined}
                  >
                    {row.cells[index] ?? ''}
                  </td>
                ))}
                <td>
                  {row.problems.length === 0 ? (
                    <StatusTag mark={GOOD} />
                  ) : (
                    <StatusTag mark={BAD}>
                      {row.problems.map((each) => `${each.column}: ${each.message}`).join(' ')}
                    </StatusTag>
                  )}
                </td>
              </tr>
            ))}
          </tbody>
        </table>
      </div>
    </>
  )
}
