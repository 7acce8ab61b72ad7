import { useQuery } from '@tanstack/react-query'
import { listBatches, listWaiting, openBatch } from '@weirlight/shared/contracts'
import { LIMITS } from '@weirlight/shared/limits'
import { Button, Form, Input } from 'antd'
import { useEffect, useState } from 'react'
import { Link, useNavigate } from 'react-router-dom'
import { paths, useLaboratoryTime } from '../../../lib'
import { useEndpointForm } from '../../../lib/use-endpoint-form'
import { Box, Empty, Loaded } from '../../../ui'
import { DecimalInput } from '../../../ui/decimal-input'
import { FormProblem } from '../../../ui/form-problem'
import { MomentInput } from '../../../ui/time-inputs'
import {
  calibrationQuery,
  calibrationsInState,
  ChoiceList,
  ChoiceSelect,
  lotChoices,
  materialsQuery,
} from '../../calibrations'
import { methodDefinitionQuery, waitingQuery, type WaitingDetermination } from '../api/batch-queries'
import { firstChoice, middleLevel } from '../run-sheet/first-choice'
import { MethodPicker } from './method-picker'
import { WaitingPicker } from './waiting-picker'
import './batches.css'

interface Values {
  methodId: string
  calibrationId: string | null
  replicates: number
  determinationIds: string[]
  verificationConcentration: string
  verificationLotId: string | null
  controlConcentration: string
  controlLotId: string | null
  duplicateOf: string | null
  spikeOf: string | null
  spikeAdded: string
  reagentLotIds: string[]
  colourStartedAt: string | null
  note: string
}

const FIRST: Partial<Values> = {
  replicates: 2,
  determinationIds: [],
  reagentLotIds: [],
  verificationConcentration: '',
  controlConcentration: '',
  spikeAdded: '',
  note: '',
}

/** A batch from waiting determinations: what goes in, what it is read against, what controls it. */
export function OpenBatch({ methodId: asked }: { methodId: string }) {
  const navigate = useNavigate()
  const [draftId] = useState(() => crypto.randomUUID())
  const form = useEndpointForm<typeof openBatch, Values>({
    endpoint: openBatch,
    toInput: (values) => ({
      body: {
        ...FIRST,
        ...values,
        draftId,
        calibrationId: values.calibrationId ?? '',
        replicates: Number(values.replicates),
        verificationLotId: values.verificationLotId ?? null,
        controlLotId: values.controlLotId ?? null,
        duplicateOf: values.duplicateOf ?? null,
        spikeOf: values.spikeOf ?? null,
        spikeAdded: values.spikeOf && values.spikeAdded ? values.spikeAdded : null,
        colourStartedAt: values.colourStartedAt || null,
        reagentLotIds: values.reagentLotIds ?? [],
        note: values.note ?? '',
      },
    }),
    invalidates: [listBatches, listWaiting],
    onDone: (batch) => navigate(paths.batch(batch.id), { replace: true }),
  })
  const methodId = Form.useWatch('methodId', form.form) ?? asked
  const waiting = useQuery({ ...waitingQuery(methodId), enabled: methodId !== '' })
  const counts = useQuery(waitingQuery(''))
  return (
    <Form layout="vertical" initialValues={{ ...FIRST, methodId: asked }} {...form.formProps}>
      <FormProblem form={form} />
      <div className="stack">
        <Box title="Method">
          <Loaded query={counts}>
            {(data) => (
              <Form.Item name="methodId" noStyle>
                <MethodPicker counts={data.counts} />
              </Form.Item>
            )}
          </Loaded>
        </Box>
        {methodId !== '' && (
          <Loaded query={waiting}>
            {(data) => <BatchFields key={methodId} form={form} methodId={methodId} waiting={data.items} />}
          </Loaded>
        )}
      </div>
    </Form>
  )
}

interface BatchFieldsProps {
  form: ReturnType<typeof useEndpointForm<typeof openBatch, Values>>
  methodId: string
  waiting: readonly WaitingDetermination[]
}

function BatchFields({ form, methodId, waiting }: BatchFieldsProps) {
  const { at, today } = useLaboratoryTime()
  const antForm = form.form
  const definition = useQuery(methodDefinitionQuery(methodId))
  const materials = useQuery(materialsQuery)
  const calibrations = useQuery(calibrationsInState('in-force', methodId))
  const calibrationId = Form.useWatch('calibrationId', antForm) ?? ''
  const chosen = Form.useWatch('determinationIds', antForm) ?? []
  const spikeOf = Form.useWatch('spikeOf', antForm)
  const calibration = useQuery({ ...calibrationQuery(calibrationId), enabled: calibrationId !== '' })
  const batchSize = definition.data?.acceptance.batchSize.value ?? LIMITS.batchPositions
  const inForce = calibrations.data?.items

  // another method: another rack
  useEffect(() => {
    antForm.setFieldsValue({
      calibrationId: null,
      determinationIds: firstChoice(waiting, batchSize),
      verificationLotId: null,
      controlLotId: null,
      duplicateOf: null,
      spikeOf: null,
      reagentLotIds: [],
    })
    // the first proposal only: a list read again must not undo what was chosen
    // eslint-disable-next-line react-hooks/exhaustive-deps
  }, [antForm, methodId, batchSize])
  useEffect(() => {
    const [only, ...others] = inForce ?? []
    if (only && others.length === 0) antForm.setFieldsValue({ calibrationId: only.id })
  }, [antForm, inForce])
  useEffect(() => {
    if (!calibration.data) return
    const level = middleLevel(calibration.data)
    antForm.setFieldsValue({
      verificationConcentration: level,
      controlConcentration: level,
      // another reagent lot asks for another calibration: those it was made with are proposed
      reagentLotIds: calibration.data.reagentLots.map((lot) => lot.id),
    })
  }, [antForm, calibration.data])

  if (inForce?.length === 0) {
    return (
      <Empty
        title="No calibration is in force for this method"
        action={
          <Link className="button" to={paths.calibrations}>
            Go to Calibrations
          </Link>
        }
      >
        Only a signed calibration in force can carry results.
      </Empty>
    )
  }
  const lots = (kinds: Parameters<typeof lotChoices>[0]['kinds']) =>
    definition.data && materials.data
      ? lotChoices({
          lots: materials.data.items,
          kinds,
          analyte: definition.data.analyte,
          today: today(),
        })
      : []
  const concentrationOf = (lotId: string | null) =>
    materials.data?.items.find((lot) => lot.id === lotId)?.concentration
  const takeConcentration =
    (field: 'controlConcentration' | 'verificationConcentration') => (lotId: string | null) => {
      const found = concentrationOf(lotId)
      // a lot at working strength says what is expected of it; a stock is diluted first
      const highest = Math.max(
        0,
        ...(calibration.data?.standards ?? []).map((each) => Number(each.concentration)),
      )
      if (found && Number(found) <= highest) antForm.setFieldsValue({ [field]: found })
    }
  const chosenRows = waiting.filter((row) => chosen.includes(row.id))
  const sampleChoices = chosenRows.map((row) => ({
    value: row.id,
    label: `${row.sampleNumber} · ${row.pointName}`,
    why: null,
  }))

  return (
    <>
      <Box title="Determinations">
        <Form.Item name="determinationIds">
          <WaitingPicker waiting={waiting} batchSize={batchSize} />
        </Form.Item>
      </Box>
      <Box title="Read against">
        <div className="set-up">
          <Form.Item
            name="calibrationId"
            label="Calibration in force"
            className="wide"
            rules={[{ required: true, message: 'Choose the calibration that the samples are read against.' }]}
          >
            <ChoiceSelect
              choices={(inForce ?? []).map((row) => ({
                value: row.id,
                label: `${row.number} · ${row.instrumentName} · ${row.cellPathCm} cm${row.validUntil ? `, until ${at(row.validUntil)}` : ''}`,
                why: null,
              }))}
            />
          </Form.Item>
          <Form.Item name="replicates" label="Readings a position">
            <select className="field">
              {Array.from({ length: LIMITS.replicates }, (_, index) => (
                <option key={index} value={index + 1}>
                  {index + 1}
                </option>
              ))}
            </select>
          </Form.Item>
        </div>
      </Box>
      <Box title="Quality control">
        <div className="set-up">
          <Form.Item name="verificationConcentration" label="Verification standard, mg/L" required>
            <DecimalInput />
          </Form.Item>
          <Form.Item name="verificationLotId" label="Made from">
            <ChoiceSelect
              none="No lot named"
              choices={lots(['stock', 'working-standard', 'second-source'])}
              onChange={takeConcentration('verificationConcentration')}
            />
          </Form.Item>
          <Form.Item name="controlConcentration" label="Control sample, mg/L" required>
            <DecimalInput />
          </Form.Item>
          <Form.Item name="controlLotId" label="Made from">
            <ChoiceSelect
              none="No lot named"
              choices={lots(['control', 'second-source'])}
              onChange={takeConcentration('controlConcentration')}
            />
          </Form.Item>
          <Form.Item name="duplicateOf" label="Measured twice">
            <ChoiceSelect none="The first sample" choices={sampleChoices} />
          </Form.Item>
          <Form.Item name="spikeOf" label="Spiked">
            <ChoiceSelect none="None" choices={sampleChoices} />
          </Form.Item>
          {spikeOf && (
            <Form.Item name="spikeAdded" label="Added to the spike, mg/L" required>
              <DecimalInput />
            </Form.Item>
          )}
        </div>
        <p className="note">
          A verification blank and standard open and close the run; a method blank and the control sample
          stand before the samples.
        </p>
      </Box>
      <Box title="At the bench">
        <div className="set-up">
          <Form.Item name="reagentLotIds" label="Reagent lots" className="wide">
            <ChoiceList choices={lots(['reagent'])} empty="No reagent lots are recorded for this metal." />
          </Form.Item>
          <Form.Item name="colourStartedAt" label="Colour reagent added (may be set later)">
            <MomentInput />
          </Form.Item>
          <Form.Item name="note" label="Note" className="wide">
            <Input.TextArea autoSize={{ minRows: 1, maxRows: 5 }} />
          </Form.Item>
        </div>
      </Box>
      <div className="row">
        <Button type="primary" htmlType="submit" loading={form.isBusy} disabled={chosen.length === 0}>
          Open the batch
        </Button>
        <span className="note">
          {chosen.length === 0
            ? 'Choose at least one determination.'
            : `${chosen.length} ${chosen.length === 1 ? 'sample goes' : 'samples go'} into it.`}
        </span>
      </div>
    </>
  )
}
