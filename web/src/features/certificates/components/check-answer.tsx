import { useQuery } from '@tanstack/react-query'
import { formatInstantWithOffset } from '../../../lib'
import { Failed, SkeletonLines, StatusTag, type Mark } from '../../../ui'
import { checkQuery, type CheckAnswer } from '../api/certificate-queries'
import { codeProblem, groupedHash, writtenCode } from '../code-words'
import { CheckFile } from './check-file'

/** What the laboratory says about a code: whether it issued the certificate, and whether it is current. Nothing of its results. */
export function CheckAnswerBox({ code }: { code: string }) {
  const slip = codeProblem(code)
  const query = useQuery({ ...checkQuery(writtenCode(code)), enabled: slip === null, retry: 1 })
  return (
    <section className="check-answer" aria-live="polite" aria-label="Answer">
      {slip !== null ? (
        <p className="above">{slip}</p>
      ) : query.data ? (
        <Said answer={query.data} code={writtenCode(code)} />
      ) : query.isError ? (
        <Failed problem={query.error} retry={() => void query.refetch()} />
      ) : (
        <SkeletonLines lines={3} />
      )}
    </section>
  )
}

const MARKS = {
  issued: { word: 'Genuine and current', shape: 'disc', tone: 'meets' },
  superseded: { word: 'Genuine, but replaced', shape: 'diamond', tone: 'caution' },
  withdrawn: { word: 'Genuine, but withdrawn', shape: 'triangle', tone: 'above' },
  unknown: { word: 'Not known here', shape: 'triangle', tone: 'above' },
} as const satisfies Record<string, Mark>

function Said({ answer, code }: { answer: CheckAnswer; code: string }) {
  const laboratory = answer.laboratoryName ?? 'This laboratory'
  if (!answer.found || answer.state === null) {
    return (
      <>
        <StatusTag mark={MARKS.unknown} />
        <p>
          {laboratory} has issued no certificate with the code <strong className="strong">{code}</strong>.
          Compare it letter by letter with the printed one. Where it is the same, do not rely on the paper,
          and ask the laboratory.
        </p>
      </>
    )
  }
  return (
    <>
      <StatusTag mark={MARKS[answer.state]} />
      <p>
        {laboratory} issued certificate <strong className="strong nowrap">{answer.number}</strong>
        {answer.issuedAt !== null && (
          <>
            {' '}
            on{' '}
            <span className="nowrap">
              {formatInstantWithOffset(answer.issuedAt, answer.timeZone ?? 'UTC')}
            </span>
          </>
        )}
        . {standing(answer)}
      </p>
      <p className="note">
        This says nothing of its results: whoever holds the certificate reads them there. To see that none was
        altered, compare the file.
      </p>
      <CheckFile sha256={answer.sha256} number={answer.number ?? 'the certificate'} />
      {answer.sha256 !== null && (
        <dl className="proof">
          <dt>SHA-256 of the file as issued</dt>
          <dd className="hash">{groupedHash(answer.sha256)}</dd>
        </dl>
      )}
    </>
  )
}

function standing({ state, replacedBy }: CheckAnswer): string {
  if (state === 'issued') return 'It is the current one.'
  if (state === 'withdrawn') return 'It was withdrawn later: do not use it, and ask the laboratory.'
  return replacedBy === null
    ? 'An amendment took its place: do not use this one.'
    : `The amendment ${replacedBy} took its place: do not use this one.`
}
