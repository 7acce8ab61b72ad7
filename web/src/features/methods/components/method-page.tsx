import { useQuery } from '@tanstack/react-query'
import { determinationName, type MethodRecord } from '@weirlight/shared/contracts'
import { Link } from 'react-router-dom'
import { paths, useCan } from '../../../lib'
import {
  Bar,
  Box,
  Cautions,
  Columns,
  DataTable,
  Loaded,
  MarginPage,
  Provenance,
  StatusTag,
  type Column,
} from '../../../ui'
import { TintLadder } from '../../../ui/tint'
import { methodQuery, recordOf, type MethodView } from '../api/method-queries'
import { approvalMark, ladderSteps } from '../method-words'
import {
  MethodAcceptance,
  MethodCautions,
  MethodCells,
  MethodConstants,
  MethodInterferences,
  Sentence,
} from './method-facts'
import { methodMark } from './methods-list'

const LIST = { to: paths.methods, label: 'Methods' }

/** The whole catalogue entry of a method, readable at the bench. */
export function MethodById({
  id,
  programmeNames,
}: {
  id: string
  programmeNames: ReadonlyMap<string, string>
}) {
  return (
    <Loaded query={useQuery(methodQuery(id))} skeleton="page" what="method" back={LIST}>
      {(method) => <MethodPage method={method} programmeNames={programmeNames} />}
    </Loaded>
  )
}

function MethodPage({
  method,
  programmeNames,
}: {
  method: MethodView
  programmeNames: ReadonlyMap<string, string>
}) {
  const may = useCan()
  const record = recordOf(method)
  const { development } = record
  return (
    <MarginPage
      title={method.title}
      subtitle={determinationName(method.analyte, method.form)}
      back={LIST}
      state={<StatusTag mark={methodMark(method)} />}
      foldLabel="The method in short"
      facts={[
        { term: 'Edition', detail: method.edition },
        { term: 'Read at', detail: `${method.wavelengthNm} nm` },
        { term: 'Colour', detail: record.colour },
        { term: 'Reading window', detail: `${development.minMinutes} to ${development.maxMinutes} min` },
        { term: 'Molar mass', detail: `${method.molarMass} g/mol` },
        {
          term: 'Calibrations in force',
          detail: may('calibrations.read') ? (
            <Link to={`${paths.calibrations}?methodId=${method.id}`}>{method.calibrationsInForce}</Link>
          ) : (
            String(method.calibrationsInForce)
          ),
        },
        {
          term: 'Waiting determinations',
          detail: may('samples.read') ? (
            <Link to={`${paths.waiting}?method=${method.id}`}>{method.determinationsWaiting}</Link>
          ) : (
            String(method.determinationsWaiting)
          ),
        },
      ]}
      notes={[record.cautions.length > 0 && <Cautions key="care" items={record.cautions} />]}
      bar={
        <Bar
          lead="Each number stands with its source. A diamond asks you to check it before you rely on it."
          actions={
            may('batches.run') &&
            method.determinationsWaiting > 0 && (
              <Link className="button" to={`${paths.newBatch}?method=${method.id}`}>
                Make a batch
              </Link>
            )
          }
        />
      }
    >
      <Columns side={<Side record={record} />}>
        <Chemistry record={record} />
        <MethodConstants record={record} />
        <MethodInterferences record={record} />
        <MethodAcceptance record={record} />
        <Approvals record={record} programmeNames={programmeNames} />
      </Columns>
    </MarginPage>
  )
}

function Chemistry({ record }: { record: MethodRecord }) {
  return (
    <Box title="The chemistry">
      <div className="stack">
        <p>{record.principle}</p>
        <Sentence title="Coloured species">{record.species}</Sentence>
        <Sentence title="Reagent">{record.reagent}</Sentence>
        <Sentence title="Waiting for the colour">
          {record.development.text} <Provenance of={record.development} />
        </Sentence>
        {record.otherForms.length > 0 && (
          <Sentence title="After another pre-treatment it also reports">
            {record.otherForms.map((form) => determinationName(record.analyte, form)).join('; ')}
          </Sentence>
        )}
        <Provenance of={record} />
      </div>
    </Box>
  )
}

function Side({ record }: { record: MethodRecord }) {
  return (
    <>
      <Box title="What the eye should see, 1 cm">
        <TintLadder band={record.band} steps={ladderSteps(record)} unit="mg/L" />
      </Box>
      <MethodCells record={record} />
      <Box title="Keeping the sample">
        <div className="stack">
          <p>{record.preservation}</p>
          <Sentence title="Container">{record.container}</Sentence>
          <Sentence title="Holding time">
            {record.holdTime.text} <Provenance of={record.holdTime} />
          </Sentence>
        </div>
      </Box>
      <MethodCautions record={record} />
    </>
  )
}

function Approvals({
  record,
  programmeNames,
}: {
  record: MethodRecord
  programmeNames: ReadonlyMap<string, string>
}) {
  const columns: Column<MethodRecord['approvals'][number]>[] = [
    {
      key: 'programme',
      title: 'Programme',
      text: (row) => programmeNames.get(row.programme) ?? row.programme,
    },
    { key: 'what', title: 'For', text: (row) => determinationName(row.analyte, row.form) },
    { key: 'status', title: 'Standing', cell: (row) => <StatusTag mark={approvalMark(row.status)} /> },
    {
      key: 'words',
      title: 'What is printed',
      cell: (row) => (
        <>
          {row.statement} <Provenance of={row} />
        </>
      ),
    },
  ]
  return (
    <Box title="Approved for which purpose">
      <DataTable
        label="Approvals"
        rows={record.approvals}
        columns={columns}
        rowKey={(row) => `${row.programme} ${row.form}`}
        empty={{ title: 'No approval is recorded' }}
      />
    </Box>
  )
}
