import { useQuery } from '@tanstack/react-query'
import { ENGINE_VERSION } from '@weirlight/shared/assay'
import {
  listValidationRuns,
  runValidation,
  validationJson,
  validationPdf,
  type ResponseOf,
} from '@weirlight/shared/contracts'
import { Button } from 'antd'
import { asProblem, hrefFor, queryFor, useCall, useCan, useLaboratoryTime, useNotice } from '../../../lib'
import { Bar, DataTable, Failed, StatusTag, Strip, type Column } from '../../../ui'
import './validation.css'

type Run = ResponseOf<typeof listValidationRuns>['items'][number]

const DRAWING_PAUSE = 4000

function outcomeMark(run: Run) {
  if (run.failed > 0) return { word: `${run.failed} failed`, shape: 'triangle', tone: 'above' } as const
  return { word: 'all passed', shape: 'disc', tone: 'meets' } as const
}

/** Published cases through the calculations of this installation: run, counted, kept, taken away. */
export function ValidationRuns() {
  const may = useCan()
  const notice = useNotice()
  const { at } = useLaboratoryTime()
  const query = useQuery({
    ...queryFor(listValidationRuns),
    // the report is drawn after the answer
    refetchInterval: (current) =>
      current.state.data?.items.some((run) => !run.rendered) ? DRAWING_PAUSE : false,
  })
  const start = useCall(runValidation, {
    invalidates: [listValidationRuns],
    onDone: (run) =>
      run.failed === 0
        ? notice.done(`All ${run.cases} cases passed.`)
        : notice.failed(`${run.failed} of ${run.cases} cases failed: read the report.`),
  })
  const columns: Column<Run>[] = [
    { key: 'at', title: 'Run', text: (row) => at(row.at) },
    { key: 'outcome', title: 'Outcome', cell: (row) => <StatusTag mark={outcomeMark(row)} /> },
    { key: 'cases', title: 'Cases', kind: 'number', text: (row) => String(row.cases) },
    { key: 'passed', title: 'Passed', kind: 'number', text: (row) => String(row.passed) },
    { key: 'failed', title: 'Failed', kind: 'number', text: (row) => String(row.failed) },
    { key: 'engine', title: 'Calculations', text: (row) => row.engineVersion },
    { key: 'by', title: 'By', text: (row) => row.by.name },
    {
      key: 'files',
      title: 'Report',
      cell: (row) => (
        <span className="row">
          {row.rendered ? (
            <a href={hrefFor(validationPdf, { params: { id: row.id } })}>PDF</a>
          ) : (
            <span className="quiet">PDF is being drawn</span>
          )}
          <a href={hrefFor(validationJson, { params: { id: row.id } })} download>
            JSON
          </a>
        </span>
      ),
    },
    {
      key: 'sha',
      title: 'SHA-256 of the JSON',
      isSecondary: true,
      cell: (row) => <code className="run-hash">{row.sha256}</code>,
    },
  ]
  const last = query.data?.items[0]
  return (
    <>
      <Bar
        lead="Published cases, each with its source, are computed here and compared. Run it after every update, and keep the report."
        actions={
          may('validation.run') && (
            <Button type="primary" loading={start.isPending} onClick={() => start.mutate({})}>
              {start.isPending ? 'Running every case…' : 'Run the validation'}
            </Button>
          )
        }
      />
      {start.error && (
        <Strip tone="above" isAlert>
          {start.error.message}
        </Strip>
      )}
      {last && last.engineVersion !== ENGINE_VERSION && (
        <Strip tone="caution">
          The calculations have changed since the last run, from {last.engineVersion} to {ENGINE_VERSION}. Run
          the validation before results are released with them.
        </Strip>
      )}
      {query.isError && !query.data ? (
        <Failed problem={asProblem(query.error)} retry={() => void query.refetch()} />
      ) : (
        <DataTable
          label="Validation runs"
          rows={query.data?.items}
          columns={columns}
          rowKey={(row) => row.id}
          empty={{
            title: 'No run is kept yet',
            text: 'A laboratory validates its system before it relies on it. The run takes some seconds.',
          }}
        />
      )}
    </>
  )
}
