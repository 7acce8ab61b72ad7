import { solutionColour, type ColourBand } from '@weirlight/shared/assay'

const SIZES = {
  small: { width: 16, height: 24, fill: 5 },
  large: { width: 26, height: 44, fill: 5 },
}

/** Colour of a solution; below zero there is no less than no colour. */
export function tintOf(band: ColourBand, absorbance: number): string {
  return solutionColour({ band, absorbance: Math.max(0, absorbance) }).hex
}

interface TintProps {
  band: ColourBand
  /** null: nothing read yet, an empty cell is drawn */
  absorbance: number | null
  size?: keyof typeof SIZES
  /** true beside a number that already says it */
  isDecorative?: boolean
}

/** A drawn cuvette with the colour its absorbance should show, for comparing with the rack by eye. */
export function Tint({ band, absorbance, size = 'small', isDecorative = false }: TintProps) {
  const { width, height, fill } = SIZES[size]
  const label =
    absorbance === null ? 'Tint: nothing read yet' : `Tint expected at absorbance ${absorbance.toFixed(3)}`
  return (
    <svg
      className="tint"
      width={width}
      height={height}
      viewBox={`0 0 ${width} ${height}`}
      {...(isDecorative ? { 'aria-hidden': true } : { role: 'img', 'aria-label': label })}
    >
      {absorbance !== null && Number.isFinite(absorbance) && (
        <>
          {/* the white sheet behind the rack: the colour is computed against daylight on white, in both themes */}
          <rect className="tint-water" x="1" y={fill} width={width - 2} height={height - fill - 1} />
          <rect x="1" y={fill} width={width - 2} height={height - fill - 1} fill={tintOf(band, absorbance)} />
        </>
      )}
      <path
        className="tint-glass"
        strokeWidth="1.5"
        d={`M.75 0V${height - 2.75}a2 2 0 0 0 2 2H${width - 2.75}a2 2 0 0 0 2-2V0`}
      />
    </svg>
  )
}

interface TintLadderProps {
  band: ColourBand
  steps: readonly { label: string; absorbance: number | null }[]
  unit: string
}

/** The standards of a calibration as they should stand in the rack. */
export function TintLadder({ band, steps, unit }: TintLadderProps) {
  return (
    <figure className="ladder">
      <span className="note">
        Ladder
        <br />
        {unit}
      </span>
      <ol>
        {steps.map((step, index) => (
          <li key={index}>
            <Tint band={band} absorbance={step.absorbance} size="large" isDecorative />
            <span>{step.label}</span>
          </li>
        ))}
      </ol>
      <figcaption>What the rack should look like. A step out of order is a tube out of place.</figcaption>
    </figure>
  )
}
