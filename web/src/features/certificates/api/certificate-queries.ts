import {
  amendCertificate,
  certificatePdf,
  checkCertificate,
  getCertificate,
  getToday,
  listCertificates,
  listClients,
  sendCertificateAgain,
  withdrawCertificate,
  type CertificateSnapshot,
  type CertificateView,
  type QueryInput,
  type ResponseOf,
} from '@weirlight/shared/contracts'
import { hrefFor, pagesFor, queryFor, useCall } from '../../../lib'

export type { CertificateSnapshot, CertificateView }
export type CertificateRow = ResponseOf<typeof listCertificates>['items'][number]
export type CheckAnswer = ResponseOf<typeof checkCertificate>

export const certificatePages = (filters: { state: string; clientId: string; number: string }) =>
  pagesFor(listCertificates, { query: filters as QueryInput<typeof listCertificates> })

const WHILE_BEING_MADE = 2000

/** One certificate; asked again every two seconds while its document is being made. */
export const certificateQuery = (id: string) => {
  const options = queryFor(getCertificate, { params: { id } })
  return {
    ...options,
    refetchInterval: (query: { state: { data?: CertificateView | undefined } }) =>
      query.state.data?.rendered === false ? WHILE_BEING_MADE : (false as const),
  }
}
export const documentHref = (id: string) => hrefFor(certificatePdf, { params: { id } })
export const checkQuery = (code: string) => queryFor(checkCertificate, { params: { code } })
export const clientsQuery = queryFor(listClients)

const TOUCHES = [getCertificate, listCertificates, getToday]
export const useAmend = () => useCall(amendCertificate, { invalidates: TOUCHES })
export const useWithdraw = () => useCall(withdrawCertificate, { invalidates: TOUCHES })
export const useSendAgain = () => useCall(sendCertificateAgain, { invalidates: TOUCHES })
