import { useQuery } from '@tanstack/react-query'
import { listCalibrations, startCalibration } from '@weirlight/shared/contracts'
import { Button, Form, Radio } from 'antd'
import { useState } from 'react'
import { useNavigate } from 'react-router-dom'
import { paths, useLaboratoryTime } from '../../../lib'
import { useEndpointForm } from '../../../lib/use-endpoint-form'
import { Box, Columns, KeyValues, Loaded, Strip } from '../../../ui'
import { FormProblem } from '../../../ui/form-problem'
import { methodsQuery } from '../api/calibration-queries'
import { bodyOf, type CalibrationDraft } from '../draft/calibration-draft'
import { firstStandards } from '../draft/first-standards'
import { instrumentChoices, lotChoices } from '../draft/lots'
import { useBenchStock, useMethod, type Method } from '../hooks/use-bench-facts'
import { ChoiceList, ChoiceSelect } from './choice-select'
import './calibrations.css'

interface Values {
  methodId: string
  instrumentId: string
  cellPathCm: string
  stockLotId: string | null
  reagentLotIds: string[]
}

function newDraft(values: Values, method: Method): CalibrationDraft {
  return {
    instrumentId: values.instrumentId,
    cellPathCm: values.cellPathCm,
    stockLotId: values.stockLotId ?? null,
    reagentLotIds: values.reagentLotIds ?? [],
    model: 'linear',
    weighting: 'none',
    colourStartedAt: null,
    temperatureC: '',
    note: '',
    standards: firstStandards(method.definition, values.cellPathCm).map((row, index) => ({
      ...row,
      key: String(index),
    })),
  }
}

/** What must be known before the first reading: method, instrument, cell, lots. */
export function StartCalibration({ methodId: asked }: { methodId: string }) {
  const navigate = useNavigate()
  const { today } = useLaboratoryTime()
  const methods = useQuery(methodsQuery)
  const stock = useBenchStock()
  const [draftId] = useState(() => crypto.randomUUID())
  const [methodId, setMethodId] = useState(asked)
  const method = useMethod(methodId)
  const form = useEndpointForm<typeof startCalibration, Values>({
    endpoint: startCalibration,
    toInput: (values) => {
      if (!method.data) throw new Error('the form is drawn once the method is there')
      return {
        body: { draftId, methodId: values.methodId, ...bodyOf(newDraft(values, method.data)) },
      }
    },
    invalidates: [listCalibrations],
    onDone: (view) => navigate(paths.calibration(view.id), { replace: true }),
  })
  const lots = (kind: 'stock' | 'reagent') =>
    method.data
      ? lotChoices({
          lots: stock.materials,
          kinds: [kind],
          analyte: method.data.definition.analyte,
          today: today(),
        })
      : []

  return (
    <Form layout="vertical" initialValues={{ methodId: asked, reagentLotIds: [] }} {...form.formProps}>
      <FormProblem form={form} />
      <div className="stack">
        <Box title="Method">
          <Loaded query={methods}>
            {({ items }) => (
              <Form.Item name="methodId" noStyle>
                <Radio.Group
                  className="choice-list"
                  onChange={(event) => {
                    setMethodId(String(event.target.value))
                    form.form.setFieldsValue({ stockLotId: null, reagentLotIds: [] })
                  }}
                >
                  {items
                    .filter((each) => each.active)
                    .map((each) => (
                      <Radio key={each.id} value={each.id}>
                        {each.title} <span className="quiet">· {each.wavelengthNm} nm</span>
                      </Radio>
                    ))}
                </Radio.Group>
              </Form.Item>
            )}
          </Loaded>
        </Box>
        {methodId !== '' && (
          <Loaded query={method}>
            {(found) => (
              <Columns
                side={
                  <Box title="What the method asks for">
                    <MethodFacts method={found} />
                  </Box>
                }
              >
                <Box title="Instrument and cell">
                  <div className="set-up">
                    <Form.Item
                      name="instrumentId"
                      label="Instrument"
                      rules={[{ required: true, message: 'Choose the instrument.' }]}
                    >
                      <ChoiceSelect choices={instrumentChoices(stock.instruments, today())} />
                    </Form.Item>
                    <Form.Item
                      name="cellPathCm"
                      label="Cell path, cm"
                      initialValue={String(found.definition.cells[0]?.pathCm ?? 1)}
                      required
                    >
                      <CellPath cells={found.definition.cells} />
                    </Form.Item>
                  </div>
                </Box>
                <Box title="Lots">
                  <div className="set-up">
                    <Form.Item name="stockLotId" label="Stock lot" className="wide">
                      <ChoiceSelect choices={lots('stock')} />
                    </Form.Item>
                    <Form.Item name="reagentLotIds" label="Reagent lots" className="wide">
                      <ChoiceList
                        choices={lots('reagent')}
                        empty="No reagent lots are recorded for this metal. Record them on Bench, Materials."
                      />
                    </Form.Item>
                  </div>
                </Box>
                {stock.problem && (
                  <Strip tone="above">Instruments and lots could not be read; try again in a moment.</Strip>
                )}
                <div className="row">
                  <Button type="primary" htmlType="submit" loading={form.isBusy}>
                    Start the calibration
                  </Button>
                  <span className="note">
                    It becomes a draft with a number of its own, with standards proposed by the method.
                  </span>
                </div>
              </Columns>
            )}
          </Loaded>
        )}
      </div>
    </Form>
  )
}

interface CellPathProps {
  cells: Method['definition']['cells']
  value?: string
  onChange?: (value: string) => void
  id?: string
}

function CellPath({ cells, value, onChange, id }: CellPathProps) {
  return (
    <select
      className="field choice-select"
      id={id}
      value={value ?? ''}
      onChange={(event) => onChange?.(event.target.value)}
    >
      {cells.map((cell) => (
        <option key={cell.pathCm} value={String(cell.pathCm)}>
          {cell.pathCm} cm, for {cell.low} to {cell.high} mg/L
        </option>
      ))}
    </select>
  )
}

function MethodFacts({ method }: { method: Method }) {
  const { acceptance, development, reportingLimit, colour, wavelengthNm } = method.definition
  return (
    <KeyValues
      items={[
        { term: 'Standards above zero', detail: `at least ${acceptance.minimumStandardsLinear.value}` },
        { term: 'Lowest standard', detail: `at or below ${reportingLimit.value} mg/L` },
        {
          term: 'Second source',
          detail: `${acceptance.secondSourcePercent.low} to ${acceptance.secondSourcePercent.high} %`,
        },
        { term: 'Colour', detail: `${colour}, read at ${wavelengthNm} nm` },
        { term: 'Reading window', detail: `${development.minMinutes} to ${development.maxMinutes} min` },
      ]}
    />
  )
}
