import { useQuery } from '@tanstack/react-query'
import {
  ANALYTE_NAMES,
  finishMaterial,
  getMaterial,
  listMaterials,
  withdrawMaterial,
} from '@weirlight/shared/contracts'
import { Button } from 'antd'
import { useState } from 'react'
import { Link } from 'react-router-dom'
import { paths, useCall, useCan, useLaboratoryTime, useNotice } from '../../../lib'
import {
  Bar,
  Box,
  Columns,
  DataTable,
  KeyValues,
  Loaded,
  MarginPage,
  StatusTag,
  Strip,
  UsedIn,
} from '../../../ui'
import { ConfirmDialog, ReasonDialog } from '../../../ui/dialogs'
import { materialQuery, type MaterialView } from '../api/material-queries'
import { KIND_WORDS, strengthWords, usableMark } from '../material-words'
import { materialColumns } from './material-columns'

const LIST = { to: paths.materials, label: 'Materials' }

/** One lot: where it came from, and everything it touched. */
export function MaterialById({ id }: { id: string }) {
  return (
    <Loaded query={useQuery(materialQuery(id))} skeleton="page" what="lot" back={LIST}>
      {(lot) => <MaterialPage lot={lot} />}
    </Loaded>
  )
}

function MaterialPage({ lot }: { lot: MaterialView }) {
  const may = useCan()
  const { today, at } = useLaboratoryTime()
  const mark = usableMark(lot, today())
  return (
    <MarginPage
      title={`Lot ${lot.number}`}
      subtitle={lot.name}
      back={LIST}
      state={<StatusTag mark={mark} />}
      foldLabel="The lot in short"
      facts={[
        { term: 'Kind', detail: KIND_WORDS[lot.kind] },
        lot.analyte && { term: 'Metal', detail: ANALYTE_NAMES[lot.analyte] },
        lot.concentration && { term: 'Concentration', detail: strengthWords(lot) },
        { term: lot.kind === 'working-standard' ? 'Made on' : 'Received', detail: lot.receivedOn },
        lot.openedOn && { term: 'Opened', detail: lot.openedOn },
        { term: 'Expires', detail: lot.expiresOn },
        {
          term: 'Recorded',
          detail: lot.preparedBy ? `${lot.preparedBy.name}, ${at(lot.preparedAt)}` : at(lot.preparedAt),
        },
      ]}
      notes={[
        lot.hazards !== '' && (
          <>
            <strong>Care.</strong> {lot.hazards}
          </>
        ),
        lot.storage !== '' && `Keep: ${lot.storage}`,
      ]}
      bar={<Bar lead={<h2>{usesLead(lot)}</h2>} actions={<LotActions lot={lot} />} />}
    >
      {!lot.usable && (
        <Strip tone="above" title={mark.word}>
          It cannot be chosen for a calibration or a batch. What it touched before stands below, for you to
          judge.
        </Strip>
      )}
      <Columns side={<Particulars lot={lot} />}>
        <Ancestry lot={lot} />
        <Uses lot={lot} />
        {may('history.read') && (
          <p className="note">
            <Link to={`${paths.history}?number=${encodeURIComponent(lot.number)}`}>
              Every change to this lot, in the history
            </Link>
          </p>
        )}
      </Columns>
    </MarginPage>
  )
}

function usesLead({ usedIn }: MaterialView): string {
  if (usedIn.length === 0) return 'It has touched nothing yet.'
  return usedIn.length === 1 ? 'It touched one thing.' : `It touched ${usedIn.length} things.`
}

function Particulars({ lot }: { lot: MaterialView }) {
  return (
    <Box title="On the bottle">
      <KeyValues
        items={[
          lot.producer !== '' && { term: 'Producer', detail: lot.producer },
          lot.lotCode !== '' && { term: 'Producer’s lot', detail: lot.lotCode },
          lot.certificateRef !== '' && { term: 'Certificate', detail: lot.certificateRef },
          lot.storage !== '' && { term: 'Storage', detail: lot.storage },
          lot.hazards !== '' && { term: 'Hazards', detail: lot.hazards },
          { term: 'Number', detail: lot.number },
        ]}
      />
      {lot.recipe !== '' && (
        <div className="box-foot">
          <div className="note">How it was made</div>
          <p>{lot.recipe}</p>
        </div>
      )}
    </Box>
  )
}

function Ancestry({ lot }: { lot: MaterialView }) {
  const { today } = useLaboratoryTime()
  return (
    <Box title="Where it comes from, nearest first">
      <DataTable
        label="Ancestry"
        rows={lot.ancestry}
        columns={materialColumns(today())}
        rowKey={(row) => row.id}
        rowTo={(row) => paths.material(row.id)}
        empty={{
          title: 'It was not made from another lot here',
          text: lot.certificateRef
            ? `Its certificate: ${lot.certificateRef}.`
            : 'No certificate is recorded.',
        }}
      />
    </Box>
  )
}

const USE_KINDS = [
  { kind: 'lot', words: 'Lots made from it', to: paths.material },
  { kind: 'calibration', words: 'Calibrations', to: paths.calibration },
  { kind: 'batch', words: 'Batches', to: paths.batch },
] as const

function Uses({ lot }: { lot: MaterialView }) {
  return (
    <UsedIn
      title="What it touched"
      groups={USE_KINDS.map(({ kind, words, to }) => ({
        words,
        to,
        uses: lot.usedIn.filter((use) => use.kind === kind),
      }))}
      none="No calibration, batch or other lot was made with it yet."
    />
  )
}

function LotActions({ lot }: { lot: MaterialView }) {
  const may = useCan()
  const notice = useNotice()
  const [isAsking, setAsking] = useState(false)
  const [isEnding, setEnding] = useState(false)
  const finish = useCall(finishMaterial, {
    invalidates: [getMaterial, listMaterials],
    onDone: () => notice.done(`${lot.number} is used up.`),
  })
  const withdraw = useCall(withdrawMaterial, {
    invalidates: [getMaterial, listMaterials],
    onDone: () => notice.done(`${lot.number} is withdrawn.`),
  })
  if (!may('materials.manage')) return null
  return (
    <>
      <Link className="button" to={`${paths.newMaterial}?from=${lot.id}`}>
        Make a lot from it
      </Link>
      {lot.state === 'in-use' && <Button onClick={() => setEnding(true)}>Used up</Button>}
      {lot.state !== 'withdrawn' && (
        <Button danger onClick={() => setAsking(true)}>
          Take out of use
        </Button>
      )}
      <ConfirmDialog
        isOpen={isEnding}
        onClose={() => setEnding(false)}
        title={`${lot.number} is used up`}
        consequences={[
          'From now on it cannot be chosen for a calibration or a batch. What was made with it stays as it is.',
        ]}
        actionLabel="Record it"
        onConfirm={() => finish.mutateAsync({ params: { id: lot.id }, body: { version: lot.version } })}
      />
      <ReasonDialog
        isOpen={isAsking}
        onClose={() => setAsking(false)}
        title={`Take ${lot.number} out of use`}
        consequences={[
          'From now on it cannot be chosen for a calibration or a batch. Results made with it stay as they are.',
          lot.usedIn.length === 0
            ? 'It has touched nothing so far.'
            : `It touched ${lot.usedIn
                .map((use) => use.number)
                .slice(0, 8)
                .join(', ')}: judge these yourself.`,
        ]}
        actionLabel="Take out of use"
        isDangerous
        onConfirm={(reason) =>
          withdraw.mutateAsync({ params: { id: lot.id }, body: { version: lot.version, reason } })
        }
      />
    </>
  )
}
