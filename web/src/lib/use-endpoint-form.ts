import type { Endpoint, ResponseOf } from '@weirlight/shared/contracts'
import { Form, type FormInstance, type FormProps } from 'antd'
import { useEffect, useRef, useState } from 'react'
import type { CallInput } from './call'
import { contractProblems } from './contract-problems'
import { useDraft } from './drafts'
import { clearProblems, followThing, placeProblems } from './form-issues'
import { useLeaveWarning } from './leave-warning'
import { asProblem, type ProblemError } from './problem-error'
import { useCall } from './queries'

export interface EndpointFormOptions<E extends Endpoint, Values extends object> {
  endpoint: E
  toInput: (values: Values) => CallInput<E>
  invalidates?: readonly Endpoint[]
  /** version of the thing that fills the form: when it moves on, fields left alone show the new thing */
  basedOn?: number
  /** names the draft kept on this computer; left out, nothing is kept, but leaving is still warned of */
  draft?: string
  onDone?: (answer: ResponseOf<E>) => void | Promise<void>
}

export interface FormTrouble {
  problem: ProblemError | null
  /** complaints that belong to no field of this form */
  homeless: readonly string[]
  /** the refusal after which the page was read again, until the form is sent once more */
  loadedAfter: ProblemError | null
  onLoadedAgain: () => void
  blocker: ReturnType<typeof useLeaveWarning>['blocker']
}

interface EndpointForm<Values> extends FormTrouble {
  form: FormInstance<Values>
  formProps: Pick<
    FormProps<Values>,
    'form' | 'onFinish' | 'onValuesChange' | 'disabled' | 'scrollToFirstError'
  >
  isBusy: boolean
  isDirty: boolean
  /** a draft of an earlier visit was put back into the form */
  hasDraft: boolean
  discardDraft: () => void
}

/** One form, one endpoint: checked by its contract, complaints on their fields, drafts kept, sent once. */
export function useEndpointForm<E extends Endpoint, Values extends object>(
  options: EndpointFormOptions<E, Values>,
): EndpointForm<Values> {
  const { endpoint, toInput, basedOn, draft, onDone } = options
  const [form] = Form.useForm<Values>()
  const [isDirty, setDirty] = useState(false)
  const [homeless, setHomeless] = useState<readonly string[]>([])
  const [problem, setProblem] = useState<ProblemError | null>(null)
  const [loadedAfter, setLoadedAfter] = useState<ProblemError | null>(null)
  const kept = useDraft<Partial<Values>>(draft ?? 'unnamed')
  const [hasDraft, setHasDraft] = useState(draft !== undefined && kept.found !== null)
  const leave = useLeaveWarning(isDirty)
  const mutation = useCall(endpoint, { invalidates: options.invalidates ?? [] })

  useEffect(() => {
    if (draft === undefined || kept.found === null) return
    // antd's own types want every nested field; a draft holds what was there
    form.setFieldsValue(kept.found as Parameters<typeof form.setFieldsValue>[0])
    setDirty(true)
    // once, when the form appears
    // eslint-disable-next-line react-hooks/exhaustive-deps
  }, [])

  const filledFrom = useRef(basedOn)
  useEffect(() => {
    if (filledFrom.current === basedOn) return
    filledFrom.current = basedOn
    if (isDirty) followThing(form)
    else form.resetFields()
  }, [basedOn, form, isDirty])

  const onFinish = async (values: Values) => {
    if (mutation.isPending) return
    setProblem(null)
    setLoadedAfter(null)
    setHomeless([])
    clearProblems(form)
    const input = toInput(values)
    const body: unknown = (input as { body?: unknown }).body
    if (endpoint.body) {
      const slips = contractProblems(endpoint.body, body)
      if (slips.length > 0) return setHomeless(placeProblems(form, slips))
    }
    try {
      const answer = await mutation.mutateAsync(input)
      leave.release()
      kept.clear()
      setDirty(false)
      setHasDraft(false)
      await onDone?.(answer)
    } catch (error) {
      const found = asProblem(error)
      setProblem(found)
      setHomeless(placeProblems(form, found.errors))
    }
  }

  return {
    form,
    formProps: {
      form,
      onFinish: (values) => void onFinish(values),
      onValuesChange: (changed, values) => {
        clearProblems(form, changed)
        setDirty(true)
        if (draft !== undefined) kept.save(values)
      },
      scrollToFirstError: { focus: true },
    },
    problem,
    homeless,
    blocker: leave.blocker,
    isBusy: mutation.isPending,
    isDirty,
    hasDraft,
    loadedAfter,
    onLoadedAgain: () => {
      setLoadedAfter(problem)
      setProblem(null)
      setHomeless([])
      clearProblems(form)
    },
    discardDraft: () => {
      kept.clear()
      form.resetFields()
      setDirty(false)
      setHasDraft(false)
    },
  }
}
