import {
  getCalibration,
  listCalibrations,
  saveCalibration,
  type CalibrationView,
} from '@weirlight/shared/contracts'
import { useQueryClient } from '@tanstack/react-query'
import { useCallback, useEffect, useMemo, useRef, useState } from 'react'
import { call, invalidate, asProblem, type ProblemError, useDraft, useLeaveWarning } from '../../../lib'
import { calibrationQuery } from '../api/calibration-queries'
import {
  bodyOf,
  changedReadings,
  draftOf,
  idInKey,
  isSameDraft,
  placeOf,
  serverKey,
  type CalibrationDraft,
} from '../draft/calibration-draft'
import { mergeDrafts } from '../draft/merge-drafts'

export type SaveStatus =
  'saved' | 'waiting' | 'saving' | 'blocked' | 'offline' | 'stale' | 'needs-reason' | 'failed'

interface Sheet {
  /** what the server has, row by row under our own keys */
  base: CalibrationDraft
  draft: CalibrationDraft
  version: number
  /** standard id on the server → key of our row */
  keys: Record<string, string>
  /** why saved readings were changed, by cell */
  reasons: Record<string, string>
}

/** a reason that belongs to no single cell */
export const WHOLE_SHEET = 'sheet'
const DELAY = 900
const RETRY = 4000

function sheetOf(view: CalibrationView): Sheet {
  const draft = draftOf(view)
  return { base: draft, draft, version: view.version, keys: {}, reasons: {} }
}

/** A draft kept on this computer is put on top of what the server has now; both sides' entries stay. */
export function restore(view: CalibrationView, kept: Sheet | null): { sheet: Sheet; clashes: string[] } {
  if (!kept || isSameDraft(kept.base, kept.draft)) return { sheet: sheetOf(view), clashes: [] }
  const theirs = draftOf(view, (id) => kept.keys[id] ?? serverKey(id))
  const { draft, clashes } = mergeDrafts({ base: kept.base, mine: kept.draft, theirs })
  return { sheet: { ...kept, base: theirs, draft, version: view.version }, clashes }
}

function idOf(sheet: Sheet, key: string): string | null {
  const own = Object.entries(sheet.keys).find(([, known]) => known === key)
  return own?.[0] ?? idInKey(key)
}

/** After a save the server's rows stand in the order they were sent: each keeps its key on the page. */
function keysAfter(view: CalibrationView, sent: CalibrationDraft): Record<string, string> {
  const rows = view.standards.toSorted((a, b) => a.position - b.position)
  return Object.fromEntries(
    rows.flatMap((row, index) => {
      const key = sent.standards[index]?.key
      return key ? [[row.id, key]] : []
    }),
  )
}

/**
 * The draft of one calibration: saved on the server a moment after each change, kept on this computer until it is there, merged when
 * somebody else changed it meanwhile. A changed reading waits for its reason.
 */
export function useCalibrationDraft(view: CalibrationView) {
  const client = useQueryClient()
  const { found: kept, save: keep, clear: forget } = useDraft<Sheet>(`calibration-${view.id}`)
  const [first] = useState(() => restore(view, kept))
  const [sheet, setSheet] = useState(first.sheet)
  const [clashes, setClashes] = useState(first.clashes)
  const [isSaving, setSaving] = useState(false)
  const [problem, setProblem] = useState<ProblemError | null>(null)
  const latest = useRef(sheet)
  const running = useRef<Promise<boolean> | null>(null)
  const timer = useRef<ReturnType<typeof setTimeout> | undefined>(undefined)

  const isDirty = !isSameDraft(sheet.base, sheet.draft)
  const slips = useMemo(() => slipsOf(sheet), [sheet])
  const missing = useMemo(() => unexplained(sheet), [sheet])
  const leave = useLeaveWarning(isDirty && (slips.length > 0 || problem !== null))

  const put = useCallback(
    (next: Sheet) => {
      latest.current = next
      setSheet(next)
      if (isSameDraft(next.base, next.draft)) forget()
      else keep(next)
    },
    [keep, forget],
  )

  /** true when the server has everything */
  const save = useCallback(async (): Promise<boolean> => {
    clearTimeout(timer.current)
    if (running.current) await running.current
    const sent = latest.current
    if (isSameDraft(sent.base, sent.draft)) return true
    if (slipsOf(sent).length > 0 || unexplained(sent).length > 0) return false
    const run = async () => {
      setSaving(true)
      try {
        const reason = reasonOf(sent)
        const answer = await call(saveCalibration, {
          params: { id: view.id },
          body: {
            version: sent.version,
            ...bodyOf(sent.draft, (key) => idOf(sent, key)),
            ...(reason ? { reason } : {}),
          },
        })
        client.setQueryData(calibrationQuery(view.id).queryKey, answer)
        void invalidate(client, [listCalibrations])
        put({
          ...latest.current,
          base: sent.draft,
          version: answer.version,
          keys: keysAfter(answer, sent.draft),
          reasons: latest.current.draft === sent.draft ? {} : latest.current.reasons,
        })
        setProblem(null)
        return true
      } catch (error) {
        setProblem(asProblem(error))
        return false
      } finally {
        setSaving(false)
        running.current = null
      }
    }
    running.current = run()
    const isDone = await running.current
    if (isDone && latest.current.draft !== sent.draft) return save()
    return isDone
  }, [client, put, view.id])

  useEffect(() => {
    clearTimeout(timer.current)
    if (!isDirty) return
    // refused as it stands: sent again when something changes
    if (problem && problem.code !== 'offline' && problem.code !== 'unavailable') return
    timer.current = setTimeout(() => void save(), problem ? RETRY : DELAY)
    return () => clearTimeout(timer.current)
  }, [sheet, isDirty, problem, save])

  const change = useCallback(
    (
      next: CalibrationDraft | ((draft: CalibrationDraft) => CalibrationDraft),
      reasons: Record<string, string> = {},
    ) => {
      const current = latest.current
      const draft = typeof next === 'function' ? next(current.draft) : next
      setProblem((found) => (found?.code === 'stale' || found?.code === 'offline' ? found : null))
      put({ ...current, draft, reasons: { ...current.reasons, ...reasons } })
    },
    [put],
  )

  /** Somebody else saved in between: reads theirs and puts what was entered here on top of it. */
  const takeTheirs = useCallback(async () => {
    const fresh = await call(getCalibration, { params: { id: view.id } })
    client.setQueryData(calibrationQuery(view.id).queryKey, fresh)
    const merged = restore(fresh, latest.current)
    setClashes(merged.clashes)
    put(merged.sheet)
    setProblem(null)
  }, [client, put, view.id])

  return {
    draft: sheet.draft,
    base: sheet.base,
    version: sheet.version,
    getVersion: () => latest.current.version,
    change,
    save,
    takeTheirs,
    clashes,
    forgetClashes: () => setClashes([]),
    /** complaints of the contract about what stands in the sheet */
    slips,
    problem,
    /** saved readings that were changed and have no reason yet */
    unexplained: missing,
    isDirty,
    blocker: leave.blocker,
    status: statusOf({
      isDirty,
      isSaving,
      problem,
      hasSlips: slips.length > 0,
      needsReason: missing.length > 0,
    }),
  }
}

interface Slip {
  path: string
  message: string
  cell: ReturnType<typeof placeOf>
}

function slipsOf(sheet: Sheet): Slip[] {
  const found = saveCalibration.body.safeParse({ version: sheet.version, ...bodyOf(sheet.draft) })
  return (found.error?.issues ?? []).map((issue) => {
    const path = issue.path.join('.')
    return { path, message: issue.message, cell: placeOf(path, sheet.draft) }
  })
}

function unexplained(sheet: Sheet): string[] {
  return changedReadings(sheet.base, sheet.draft).filter((cell) => !sheet.reasons[cell])
}

function reasonOf(sheet: Sheet): string {
  const cells = [...changedReadings(sheet.base, sheet.draft), WHOLE_SHEET]
  return [...new Set(cells.map((cell) => sheet.reasons[cell] ?? ''))].filter(Boolean).join('; ')
}

function statusOf(given: {
  isDirty: boolean
  isSaving: boolean
  problem: ProblemError | null
  hasSlips: boolean
  needsReason: boolean
}): SaveStatus {
  const { isDirty, isSaving, problem, hasSlips, needsReason } = given
  if (isSaving) return 'saving'
  if (!isDirty) return 'saved'
  if (problem?.code === 'stale') return 'stale'
  if (problem?.code === 'offline' || problem?.code === 'unavailable') return 'offline'
  if (problem) return 'failed'
  if (needsReason) return 'needs-reason'
  if (hasSlips) return 'blocked'
  return 'waiting'
}
