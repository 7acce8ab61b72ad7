import type { MethodDefinition } from '@weirlight/shared/contracts'
import { Input } from 'antd'
import { useState } from 'react'
import { useLaboratoryTime } from '../../../lib'
import { DecimalInput } from '../../../ui/decimal-input'
import { MomentInput } from '../../../ui/time-inputs'
import type { InstrumentRow, MaterialRow } from '../api/calibration-queries'
import type { CalibrationDraft } from '../draft/calibration-draft'
import { instrumentChoices, lotChoices } from '../draft/lots'
import { ChoiceList, ChoiceSelect } from './choice-select'
import { Labelled } from './labelled'
import { MODEL_WORDS, WEIGHTING_WORDS } from './model-words'

interface SetUpBoxProps {
  draft: CalibrationDraft
  change: (part: Partial<CalibrationDraft>) => void
  instruments: readonly InstrumentRow[]
  materials: readonly MaterialRow[]
  definition: MethodDefinition
  /** complaints by field */
  errorOf: (field: keyof CalibrationDraft) => string | null
}

/** What the calibration is made with. */
export function SetUpBox({ draft, change, instruments, materials, definition, errorOf }: SetUpBoxProps) {
  const { today } = useLaboratoryTime()
  const lots = (kinds: readonly MaterialRow['kind'][]) =>
    lotChoices({ lots: materials, kinds, analyte: definition.analyte, today: today() })
  const hasReadings = draft.standards.some((row) => row.readings.some((text) => text !== ''))
  const [isOpen, setOpen] = useState(!hasReadings)
  const named = (list: readonly { id: string; number: string }[], id: string | null) =>
    list.find((each) => each.id === id)?.number
  const inAWord = [
    instruments.find((each) => each.id === draft.instrumentId)?.name,
    `${draft.cellPathCm} cm`,
    named(materials, draft.stockLotId) ?? 'no stock lot yet',
    draft.reagentLotIds.length === 1 ? '1 reagent lot' : `${draft.reagentLotIds.length} reagent lots`,
    MODEL_WORDS[draft.model].toLowerCase(),
    draft.colourStartedAt === null && 'colour not started',
  ]
    .filter(Boolean)
    .join(' · ')
  const cell = definition.cells.find((each) => each.pathCm === Number(draft.cellPathCm))
  return (
    <details className="box set-up-box" open={isOpen} onToggle={(event) => setOpen(event.currentTarget.open)}>
      <summary>
        <h2>Set-up</h2>
        <span className="quiet">{inAWord}</span>
      </summary>
      <div className="set-up">
        <Labelled label="Instrument" error={errorOf('instrumentId')}>
          {(id) => (
            <ChoiceSelect
              id={id}
              value={draft.instrumentId}
              choices={instrumentChoices(instruments, today())}
              onChange={(value) => value && change({ instrumentId: value })}
            />
          )}
        </Labelled>
        <Labelled
          label="Cell path, cm"
          error={errorOf('cellPathCm')}
          hint={cell ? `Reads ${cell.low} to ${cell.high} mg/L by the method` : undefined}
        >
          {(id) => (
            <DecimalInput
              id={id}
              value={draft.cellPathCm}
              onChange={(cellPathCm) => change({ cellPathCm })}
            />
          )}
        </Labelled>
        <Labelled label="Stock lot" error={errorOf('stockLotId')}>
          {(id) => (
            <ChoiceSelect
              id={id}
              value={draft.stockLotId}
              choices={lots(['stock'])}
              onChange={(stockLotId) => change({ stockLotId })}
            />
          )}
        </Labelled>
        <Labelled label="Curve" error={errorOf('model')}>
          {(id) => (
            <select
              id={id}
              className="field"
              value={draft.model}
              onChange={(event) => change({ model: event.target.value as CalibrationDraft['model'] })}
            >
              {Object.entries(MODEL_WORDS).map(([value, word]) => (
                <option key={value} value={value}>
                  {word}
                </option>
              ))}
            </select>
          )}
        </Labelled>
        <Labelled label="Weights" error={errorOf('weighting')}>
          {(id) => (
            <select
              id={id}
              className="field"
              value={draft.weighting}
              onChange={(event) => change({ weighting: event.target.value as CalibrationDraft['weighting'] })}
            >
              {Object.entries(WEIGHTING_WORDS).map(([value, word]) => (
                <option key={value} value={value}>
                  {word}
                </option>
              ))}
            </select>
          )}
        </Labelled>
        <Labelled label="Temperature, °C" error={errorOf('temperatureC')}>
          {(id) => (
            <DecimalInput
              id={id}
              value={draft.temperatureC}
              onChange={(temperatureC) => change({ temperatureC })}
            />
          )}
        </Labelled>
        <Labelled
          label="Colour reagent added"
          error={errorOf('colourStartedAt')}
          hint={`Read ${definition.development.minMinutes} to ${definition.development.maxMinutes} min after it.`}
        >
          {(id) => (
            <MomentInput
              id={id}
              value={draft.colourStartedAt}
              onChange={(value) => change({ colourStartedAt: value === '' ? null : value })}
            />
          )}
        </Labelled>
        <fieldset className="labelled wide bare-set">
          <legend className="labelled-name">Reagent lots</legend>
          <ChoiceList
            value={draft.reagentLotIds}
            choices={lots(['reagent'])}
            onChange={(reagentLotIds) => change({ reagentLotIds })}
            empty="No reagent lots are recorded. Record them on Bench, Materials."
          />
          {errorOf('reagentLotIds') && <span className="note above">{errorOf('reagentLotIds')}</span>}
        </fieldset>
        <Labelled label="Note" error={errorOf('note')} isWide>
          {(id) => (
            <Input.TextArea
              id={id}
              autoSize={{ minRows: 1, maxRows: 5 }}
              value={draft.note}
              onChange={(event) => change({ note: event.target.value })}
            />
          )}
        </Labelled>
      </div>
    </details>
  )
}
