import { describe, expect, it } from 'vitest'
import { nextField } from './use-enter-moves'

function formOf(html: string): HTMLFormElement {
  const form = document.createElement('form')
  form.innerHTML = html
  document.body.replaceChildren(form)
  // jsdom lays nothing out
  for (const element of form.querySelectorAll('*')) {
    element.getClientRects = () => [{}] as unknown as DOMRectList
  }
  return form
}
const after = (form: HTMLElement, id: string) => {
  const from = form.querySelector(`#${id}`)
  if (!from) throw new Error(`no #${id}`)
  return nextField(form, from)?.id ?? null
}

describe('the field after this one', () => {
  const form = formOf(`
    <input id="point">
    <input id="hidden" type="hidden">
    <button id="now" type="button">Now</button>
    <input id="compliance" type="radio" name="purpose">
    <input id="operational" type="radio" name="purpose" checked>
    <input id="off" disabled>
    <textarea id="remarks"></textarea>
    <button id="send" type="submit">Receive</button>`)

  it('passes over buttons, hidden and disabled fields', () => {
    expect(after(form, 'operational')).toBe('remarks')
    expect(after(form, 'remarks')).toBe('send')
    expect(after(form, 'send')).toBeNull()
  })
  it('stops once in a group of radio buttons, at the chosen one', () => {
    expect(after(form, 'point')).toBe('operational')
    expect(after(form, 'compliance')).toBe('remarks')
  })
})
