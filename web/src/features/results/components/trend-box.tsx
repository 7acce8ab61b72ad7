import { useQuery } from '@tanstack/react-query'
import { determinationName, FORM_NAMES, type AnalyteCode } from '@weirlight/shared/contracts'
import { useLaboratoryTime } from '../../../lib'
import { Box, Loaded, useStory } from '../../../ui'
import { trendQuery, type FormCode } from '../api/result-queries'
import { trendWords } from '../result-words'
import { TrendFigure } from './trend-figure'

const FORMS = Object.keys(FORM_NAMES) as FormCode[]

interface TrendBoxProps {
  pointId: string
  pointName: string
  analyte: AnalyteCode
  form: FormCode
  onForm: (form: FormCode) => void
}

/** The trend of the chosen point and analyte. Forms are different quantities and never share a line. */
export function TrendBox({ pointId, pointName, analyte, form, onForm }: TrendBoxProps) {
  const story = useStory()
  const { day } = useLaboratoryTime()
  const query = useQuery(trendQuery({ pointId, analyte, form }))
  return (
    <Box title={`${determinationName(analyte, form)}, ${pointName}`}>
      <div className="trend-head">
        <span className="note">{query.data && trendWords(query.data, day)}</span>
        <select
          className="field no-print"
          aria-label="Form"
          value={form}
          onChange={(event) => onForm(event.target.value as FormCode)}
        >
          {FORMS.map((each) => (
            <option key={each} value={each}>
              {determinationName(analyte, each)}
            </option>
          ))}
        </select>
      </div>
      <Loaded query={query}>
        {(trend) =>
          trend.points.length === 0 ? (
            <p className="quiet">Nothing of it is released at this point.</p>
          ) : (
            <TrendFigure trend={trend} {...(story.isAvailable ? { onPick: story.open } : {})} />
          )
        }
      </Loaded>
    </Box>
  )
}
