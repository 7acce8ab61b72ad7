import { useQuery } from '@tanstack/react-query'
import { addMaterial, ANALYTE_NAMES, listMaterials, type BodyInput } from '@weirlight/shared/contracts'
import { Button, Form, Input } from 'antd'
import { useNavigate } from 'react-router-dom'
import { paths, useLaboratoryTime, useNotice } from '../../../lib'
import { useEndpointForm } from '../../../lib/use-endpoint-form'
import { Box, SelectInput, Strip } from '../../../ui'
import { DecimalInput } from '../../../ui/decimal-input'
import { FormProblem } from '../../../ui/form-problem'
import { DayInput } from '../../../ui/time-inputs'
import { materialQuery, materialsQuery, type MaterialKind, type MaterialRow } from '../api/material-queries'
import { KIND_HINTS, KIND_WORDS, KINDS, strengthWords, usableMark } from '../material-words'

type Body = BodyInput<typeof addMaterial>
type Values = Partial<Body>

const METALS = Object.entries(ANALYTE_NAMES).map(([value, label]) => ({ value, label }))

/** Fields that are not on the form for this kind are sent empty; empty numbers are none. */
function bodyOf(values: Values): Body {
  const text = (value: string | undefined) => value ?? ''
  const orNull = (value: string | null | undefined) => (value ? value : null)
  return {
    // an empty kind is the contract's to name
    kind: values.kind as MaterialKind,
    name: text(values.name),
    analyte: values.analyte ?? null,
    concentration: orNull(values.concentration),
    uncertainty: orNull(values.uncertainty),
    lotCode: text(values.lotCode),
    producer: text(values.producer),
    certificateRef: text(values.certificateRef),
    receivedOn: text(values.receivedOn),
    openedOn: orNull(values.openedOn),
    expiresOn: text(values.expiresOn),
    parentId: orNull(values.parentId),
    recipe: text(values.recipe),
    storage: text(values.storage),
    hazards: text(values.hazards),
  }
}

/** A new lot; what is asked depends on what it is. */
export function AddMaterial({ fromId }: { fromId: string }) {
  const navigate = useNavigate()
  const notice = useNotice()
  const { today } = useLaboratoryTime()
  const from = useQuery({ ...materialQuery(fromId), enabled: fromId !== '' })
  const form = useEndpointForm<typeof addMaterial, Values>({
    endpoint: addMaterial,
    toInput: (values) => ({ body: bodyOf(values) }),
    invalidates: [listMaterials],
    draft: fromId === '' ? 'material-new' : `material-from-${fromId}`,
    onDone: async (lot) => {
      notice.done(`Lot ${lot.number} is recorded.`)
      await navigate(paths.material(lot.id))
    },
  })
  const kind = Form.useWatch('kind', form.form) ?? null
  if (fromId !== '' && from.isPending) return null
  const first: Values = {
    receivedOn: today(),
    ...(from.data
      ? {
          kind: from.data.kind === 'reagent' ? 'reagent' : 'working-standard',
          parentId: from.data.id,
          analyte: from.data.analyte,
        }
      : {}),
  }
  return (
    <Form layout="vertical" initialValues={first} {...form.formProps}>
      <FormProblem form={form} />
      {form.hasDraft && (
        <Strip tone="quiet" action={<Button onClick={form.discardDraft}>Start afresh</Button>}>
          What you had entered before is back in the form.
        </Strip>
      )}
      <div className="stack">
        <Box title="What it is">
          <div className="form-grid">
            <Form.Item name="kind" label="Kind" required extra={kind ? KIND_HINTS[kind] : undefined}>
              <SelectInput options={KINDS.map((value) => ({ value, label: KIND_WORDS[value] }))} />
            </Form.Item>
            <Form.Item name="analyte" label="Metal" required={kind !== 'reagent'}>
              <SelectInput none={kind === 'reagent' ? 'No metal in particular' : 'Choose'} options={METALS} />
            </Form.Item>
            <Form.Item name="name" label="Name" required className="wide">
              <Input placeholder={kind === 'working-standard' ? 'Iron 2.00 mg/L' : ''} autoComplete="off" />
            </Form.Item>
          </div>
        </Box>
        {kind !== null && (
          <>
            {kind !== 'reagent' && <Strength />}
            <Origin kind={kind} />
            <Dates kind={kind} />
            <Box title="Keeping it">
              <div className="form-grid">
                <Form.Item name="storage" label="Storage">
                  <Input placeholder="4 °C, dark" autoComplete="off" />
                </Form.Item>
                <Form.Item name="hazards" label="Hazards and what to do about them" className="wide">
                  <Input.TextArea autoSize={{ minRows: 1, maxRows: 4 }} />
                </Form.Item>
              </div>
            </Box>
            <div className="row">
              <Button type="primary" htmlType="submit" loading={form.isBusy}>
                Record the lot
              </Button>
              <span className="note">It gets a number of its own for its label.</span>
            </div>
          </>
        )}
      </div>
    </Form>
  )
}

function Strength() {
  return (
    <Box title="Strength">
      <div className="form-grid">
        <Form.Item name="concentration" label="Concentration, mg/L" required>
          <DecimalInput />
        </Form.Item>
        <Form.Item
          name="uncertainty"
          label="Uncertainty, mg/L (k = 2)"
          extra="May stay empty where none is known."
        >
          <DecimalInput />
        </Form.Item>
      </div>
    </Box>
  )
}

function Origin({ kind }: { kind: MaterialKind }) {
  const isMadeHere = kind === 'working-standard'
  return (
    <Box title={isMadeHere ? 'How it was made' : 'Where it comes from'}>
      <div className="form-grid">
        {!isMadeHere && (
          <>
            <Form.Item name="producer" label="Producer">
              <Input autoComplete="off" />
            </Form.Item>
            <Form.Item name="lotCode" label="Producer’s lot">
              <Input autoComplete="off" />
            </Form.Item>
            <Form.Item name="certificateRef" label="Certificate" extra="Its number, and where it is kept.">
              <Input autoComplete="off" />
            </Form.Item>
          </>
        )}
        <Form.Item
          name="parentId"
          label={isMadeHere ? 'Made from' : 'Made from a lot of ours'}
          required={isMadeHere}
          className={isMadeHere ? 'wide' : ''}
        >
          <ParentSelect kind={kind} />
        </Form.Item>
        <Form.Item
          name="recipe"
          label="Recipe"
          required={isMadeHere}
          className="wide"
          extra="Volumes, flask, pipette, water; enough to make it again."
        >
          <Input.TextArea autoSize={{ minRows: isMadeHere ? 2 : 1, maxRows: 6 }} />
        </Form.Item>
      </div>
    </Box>
  )
}

const dontMix = (lot: MaterialRow, analyte: Values['analyte']) =>
  lot.analyte !== null && analyte !== null && analyte !== undefined && lot.analyte !== analyte

function ParentSelect({
  kind,
  ...control
}: {
  kind: MaterialKind
  value?: string | null
  onChange?: (id: string | null) => void
  id?: string
}) {
  const { today } = useLaboratoryTime()
  const analyte = Form.useWatch<Values['analyte']>('analyte')
  const lots = useQuery(materialsQuery())
  const options = (lots.data?.items ?? [])
    .filter(
      (lot) =>
        (kind === 'reagent' ? lot.kind === 'reagent' : lot.kind !== 'reagent') && !dontMix(lot, analyte),
    )
    .map((lot) => ({
      value: lot.id,
      label: `${lot.number} · ${lot.name} ${strengthWords(lot)}, to ${lot.expiresOn}`,
      why: lot.usable ? null : usableMark(lot, today()).word,
    }))
    .toSorted((a, b) => Number(a.why !== null) - Number(b.why !== null))
  return (
    <SelectInput
      {...control}
      none={kind === 'working-standard' ? 'Choose the lot' : 'None'}
      options={options}
    />
  )
}

function Dates({ kind }: { kind: MaterialKind }) {
  return (
    <Box title="Dates">
      <div className="form-grid">
        <Form.Item name="receivedOn" label={kind === 'working-standard' ? 'Made on' : 'Received on'} required>
          <DayInput />
        </Form.Item>
        <Form.Item name="openedOn" label="Opened on">
          <DayInput />
        </Form.Item>
        <Form.Item
          name="expiresOn"
          label="Expires on"
          required
          extra={
            kind === 'working-standard'
              ? 'Not after the lot it is made from.'
              : 'As on the bottle, or earlier.'
          }
        >
          <DayInput />
        </Form.Item>
      </div>
    </Box>
  )
}
