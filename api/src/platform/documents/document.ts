import type { Content, StyleDictionary, TDocumentInformation } from 'pdfmake/interfaces.js'

/**
 * A document as plain data: it is laid out in another thread, which functions cannot reach. Header and
 * footer may say `{page}` and `{pages}`.
 */
export interface DocumentDefinition {
  content: Content
  title: string
  /** when it was made, as the document itself says it */
  createdAt: Date
  header?: Content
  footer?: Content
  styles?: StyleDictionary
  fontSize?: number
  lineHeight?: number
  /** left, top, right, bottom in points */
  margins?: [number, number, number, number]
  isLandscape?: boolean
  /** across every page, e.g. SUPERSEDED */
  watermark?: string
  info?: Omit<TDocumentInformation, 'title' | 'creationDate' | 'modDate'>
}
