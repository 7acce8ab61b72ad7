import { determinationName } from '@weirlight/shared/contracts'
import { STATE_MARKS } from '@weirlight/shared/states'
import { StatusTag } from '../../../ui'
import type { SampleRow } from '../api/sample-queries'
import './samples.css'

/** What is determined in a sample, each with the shape of its state. */
export function DeterminationNames({ of }: { of: SampleRow['determinations'] }) {
  return (
    <ul className="determination-names">
      {of.map((each) => {
        const mark = STATE_MARKS.determination[each.state]
        return (
          <li key={`${each.analyte} ${each.form} ${each.state}`} title={mark.word}>
            <StatusTag mark={mark}>
              {determinationName(each.analyte, each.form)}
              <span className="visually-hidden">: {mark.word}</span>
            </StatusTag>
          </li>
        )
      })}
    </ul>
  )
}
