// What features use of the platform; everything else here is its own business.
export { Clock } from './clock/clock.js'
export { readTime, showDay, showTime } from './clock/zoned-time.js'
export { Settings } from './config/settings.js'
export { SYSTEM, type Acting } from './database/acting.js'
export { Database } from './database/database.js'
export type { DB, Executor, Trx } from './database/executor.js'
export { fromCursor, idFromCursor, toCursor, toPage } from './database/paging.js'
export { isUniqueViolation } from './database/postgres-errors.js'
export { assertVersion } from './database/versions.js'
export { chartSvg } from './documents/chart-svg.js'
export type { DocumentDefinition } from './documents/document.js'
export { DocumentsService } from './documents/documents.service.js'
export { DomainEvents } from './events/domain-events.js'
export { defineEvent, type DomainEvent } from './events/event.js'
export { HandlesEvent } from './events/handles-event.decorator.js'
export {
  CurrentActor,
  Endpoint,
  Input,
  MaybeActor,
  Upload,
  type AnswerOf,
  type InputOf,
} from './http/endpoint.decorator.js'
export type { FileAnswer } from './http/file-answer.js'
export { ProblemError, invalidInput, notAllowedNow, notFound } from './http/problem.js'
export { currentRequestId } from './http/request-context.js'
export type { UploadedFile } from './http/upload.js'
export { JobHandler, type JobRun } from './jobs/job-handler.decorator.js'
export { defineJob, noData, type Job } from './jobs/job.js'
export { JobsService } from './jobs/jobs.service.js'
export { oneLine } from './mail/one-line.js'
export { MailService, type Attachment, type MailToQueue } from './mail/mail.service.js'
export type { SealRow } from './seals/seals.repository.js'
export { SealsService, type SealCheck } from './seals/seals.service.js'
export { IDLE_MINUTES, SessionService } from './sessions/session.service.js'
export { SignInThrottle, type Try } from './sessions/sign-in-throttle.js'
export { toCsv, toCsvStream, type CellValue } from './sheets/csv-writing.js'
export { findColumns, plainName, type ColumnProblem, type NamedColumn } from './sheets/named-columns.js'
export type { Sheet, SheetRow } from './sheets/sheet.js'
export { SheetsService } from './sheets/sheets.service.js'
export { toXlsx, type SheetToWrite } from './sheets/xlsx-writing.js'
export { openWorkerPool, workerFile } from './worker-pool.js'
