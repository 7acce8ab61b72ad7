import type { ThemeConfig } from 'antd'

/** The one place of colour. Every pair of text and ground here holds WCAG AA (`theme.spec.ts`). */
export interface Tokens {
  paper: string
  sheet: string
  ink: string
  quiet: string
  rule: string
  hair: string
  /** the line of what can be typed into: 3:1 against its ground */
  field: string
  weir: string
  onWeir: string
  weirSoft: string
  copper: string
  copperRule: string
  meets: string
  caution: string
  cautionSoft: string
  cautionRule: string
  above: string
  onAbove: string
  aboveSoft: string
  aboveRule: string
  qcRow: string
  glass: string
  shade: string
}

export const LIGHT: Tokens = {
  paper: '#F6F5F0',
  sheet: '#FFFFFF',
  ink: '#1B2733',
  quiet: '#5B6873',
  rule: '#D9D6CC',
  hair: '#EAE7DE',
  field: '#868E94',
  weir: '#0F4C5C',
  onWeir: '#FFFFFF',
  weirSoft: '#E3ECEC',
  copper: '#9A4A23',
  copperRule: '#E2B9A4',
  meets: '#2F6B3A',
  caution: '#8A5A00',
  cautionSoft: '#FFF7E8',
  cautionRule: '#E8D3A6',
  above: '#A61B29',
  onAbove: '#FFFFFF',
  aboveSoft: '#FBECEC',
  aboveRule: '#E6BCBF',
  qcRow: '#FAF9F5',
  glass: '#8B949B',
  shade: 'rgba(27, 39, 51, 0.45)',
}

export const DARK: Tokens = {
  paper: '#14191E',
  sheet: '#1B2228',
  ink: '#E8E6DE',
  quiet: '#A3AEB7',
  rule: '#3A454E',
  hair: '#2A333B',
  field: '#75808A',
  weir: '#84C5D3',
  onWeir: '#0E1B20',
  weirSoft: '#22363D',
  copper: '#DE9A78',
  copperRule: '#6B4630',
  meets: '#82C98F',
  caution: '#E5B95C',
  cautionSoft: '#30281A',
  cautionRule: '#6A5426',
  above: '#F2949A',
  onAbove: '#2A0C10',
  aboveSoft: '#361F23',
  aboveRule: '#74383E',
  qcRow: '#1F272E',
  glass: '#7C8790',
  shade: 'rgba(0, 0, 0, 0.6)',
}

const variableName = (token: string) => `--${token.replace(/[A-Z]/g, (letter) => `-${letter.toLowerCase()}`)}`

/** The tokens as CSS variables, set through the object model: a strict content policy allows no inline style. */
export function applyTokens(tokens: Tokens): void {
  const { style } = document.documentElement
  for (const [name, value] of Object.entries(tokens)) style.setProperty(variableName(name), value)
}

export const FONT = 'Roboto, "Helvetica Neue", Arial, sans-serif'

/** `isStill`: without motion, for people whose system asks for less of it. */
export function antdTheme(tokens: Tokens, { isStill }: { isStill: boolean }): ThemeConfig {
  return {
    hashed: false,
    token: {
      colorPrimary: tokens.weir,
      colorInfo: tokens.weir,
      colorSuccess: tokens.meets,
      colorWarning: tokens.caution,
      colorError: tokens.above,
      colorErrorText: tokens.above,
      colorLink: tokens.weir,
      colorLinkHover: tokens.ink,
      colorText: tokens.ink,
      colorTextSecondary: tokens.quiet,
      colorTextTertiary: tokens.quiet,
      colorTextDescription: tokens.quiet,
      colorTextPlaceholder: tokens.quiet,
      colorTextDisabled: tokens.quiet,
      colorTextHeading: tokens.ink,
      colorTextLightSolid: tokens.onWeir,
      colorIcon: tokens.quiet,
      colorBgBase: tokens.sheet,
      colorBgContainer: tokens.sheet,
      colorBgElevated: tokens.sheet,
      colorBgLayout: tokens.paper,
      colorBgContainerDisabled: tokens.paper,
      colorBgMask: tokens.shade,
      colorFillAlter: tokens.qcRow,
      colorBorder: tokens.field,
      colorBorderSecondary: tokens.hair,
      colorSplit: tokens.hair,
      controlItemBgActive: tokens.weirSoft,
      controlItemBgHover: tokens.qcRow,
      controlOutline: tokens.weirSoft,
      borderRadius: 4,
      borderRadiusLG: 4,
      borderRadiusSM: 3,
      fontFamily: FONT,
      fontSize: 14,
      lineHeight: 20 / 14,
      controlHeight: 34,
      boxShadow: 'none',
      boxShadowSecondary: `0 4px 16px ${tokens.shade}`,
      motion: !isStill,
      motionDurationMid: '0.1s',
      motionDurationSlow: '0.15s',
      wireframe: false,
    },
    components: {
      Button: {
        defaultBorderColor: tokens.rule,
        defaultShadow: 'none',
        primaryShadow: 'none',
        dangerShadow: 'none',
        dangerColor: tokens.onAbove,
        primaryColor: tokens.onWeir,
        fontWeight: 400,
      },
      Form: { itemMarginBottom: 22, verticalLabelPadding: '0 0 4px', labelColor: tokens.ink },
      Modal: { titleFontSize: 18 },
      Select: { optionSelectedBg: tokens.weirSoft },
    },
  }
}
