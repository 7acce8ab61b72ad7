import { render, screen } from '@testing-library/react'
import userEvent from '@testing-library/user-event'
import { useState } from 'react'
import { describe, expect, it, vi } from 'vitest'
import { RunGrid } from './run-grid'
import type { CellChange, RunGridColumn } from './run-grid-types'

interface Row {
  id: string
  label: string
  isFixed?: boolean
}
// constructed
const rows: Row[] = [
  { id: '1', label: 'blank' },
  { id: '2', label: 'not ours', isFixed: true },
  { id: '3', label: 'S-26-04117' },
]
const columns: RunGridColumn<Row>[] = [
  { kind: 'show', key: 'label', title: 'Sample', text: (row) => row.label },
  { kind: 'entry', key: 'a', title: 'A₁', isEditable: (row) => !row.isFixed },
  { kind: 'entry', key: 'b', title: 'A₂', isEditable: (row) => !row.isFixed },
]
const noComma = (text: string) => (text.includes(',') ? 'Use a decimal point.' : null)

function Harness(props: { onCommit?: (changes: CellChange[]) => void; isReadOnly?: boolean }) {
  const [values, setValues] = useState<Record<string, string>>({ '1/a': '0.001' })
  return (
    <RunGrid
      label="Readings"
      rows={rows}
      rowKey={(row) => row.id}
      rowName={(row) => row.label}
      columns={columns}
      valueOf={(rowKey, columnKey) => values[`${rowKey}/${columnKey}`] ?? ''}
      onChange={(changes) =>
        setValues((old) => ({
          ...old,
          ...Object.fromEntries(changes.map((each) => [`${each.rowKey}/${each.columnKey}`, each.text])),
        }))
      }
      check={noComma}
      cellState={(rowKey) => (rowKey === '1' ? { saved: 'saved' } : {})}
      {...props}
    />
  )
}

const cell = (name: string) => screen.getByRole<HTMLInputElement>('textbox', { name })
const focused = () => document.activeElement?.getAttribute('aria-label')

describe('RunGrid', () => {
  it('moves down with Enter over what cannot be entered, then to the head of the next column', async () => {
    const user = userEvent.setup()
    render(<Harness />)
    await user.click(cell('A₁, blank'))
    await user.keyboard('{Enter}')
    expect(focused()).toBe('A₁, S-26-04117')
    await user.keyboard('{Enter}')
    expect(focused()).toBe('A₂, blank')
    await user.keyboard('{Shift>}{Enter}{/Shift}')
    expect(focused()).toBe('A₁, S-26-04117')
  })

  it('moves with Tab and the arrows, and inside a number the arrows stay in it', async () => {
    const user = userEvent.setup()
    render(<Harness />)
    await user.click(cell('A₁, blank'))
    await user.keyboard('{Tab}')
    expect(focused()).toBe('A₂, blank')
    await user.keyboard('{ArrowDown}')
    expect(focused()).toBe('A₂, S-26-04117')
    await user.keyboard('{ArrowLeft}{ArrowUp}')
    expect(focused()).toBe('A₁, blank')
    await user.keyboard('0.12{ArrowLeft}{ArrowLeft}{ArrowRight}')
    expect(focused()).toBe('A₁, blank')
  })

  it('commits a changed cell once it is left, and no unchanged one', async () => {
    const user = userEvent.setup()
    const onCommit = vi.fn()
    render(<Harness onCommit={onCommit} />)
    await user.click(cell('A₁, blank'))
    await user.keyboard('{Enter}0.25{Enter}{Enter}')
    expect(onCommit).toHaveBeenCalledExactlyOnceWith([
      { rowKey: '3', columnKey: 'a', text: '0.25', how: 'typed' },
    ])
  })

  it('gives a cell its value back with Escape', async () => {
    const user = userEvent.setup()
    const onCommit = vi.fn()
    render(<Harness onCommit={onCommit} />)
    await user.click(cell('A₁, blank'))
    await user.keyboard('9.9{Escape}{Tab}')
    expect(cell('A₁, blank').value).toBe('0.001')
    expect(onCommit).not.toHaveBeenCalled()
  })

  it('lays a pasted block from the cell down, commits it whole and names what does not fit', async () => {
    const user = userEvent.setup()
    const onCommit = vi.fn()
    render(<Harness onCommit={onCommit} />)
    await user.click(cell('A₁, blank'))
    await user.paste('0.1\t0.2\n0.3\t0.4\n0.5\t0.6\n')
    expect(cell('A₁, blank').value).toBe('0.1')
    expect(cell('A₂, S-26-04117').value).toBe('0.4')
    expect(onCommit).toHaveBeenCalledExactlyOnceWith([
      { rowKey: '1', columnKey: 'a', text: '0.1', how: 'pasted' },
      { rowKey: '1', columnKey: 'b', text: '0.2', how: 'pasted' },
      { rowKey: '3', columnKey: 'a', text: '0.3', how: 'pasted' },
      { rowKey: '3', columnKey: 'b', text: '0.4', how: 'pasted' },
    ])
    expect(screen.getByRole('alert').textContent).toContain('0.5, 0.6')
    await user.keyboard('{Tab}')
    expect(onCommit).toHaveBeenCalledTimes(1)
  })

  it('puts the sentence on its cell once the cell is left', async () => {
    const user = userEvent.setup()
    render(<Harness />)
    await user.click(cell('A₁, S-26-04117'))
    await user.keyboard('0,12')
    expect(screen.queryByText(/Use a decimal point/)).toBeNull()
    await user.keyboard('{Tab}')
    const input = cell('A₁, S-26-04117')
    expect(input.getAttribute('aria-invalid')).toBe('true')
    const note = document.getElementById(input.getAttribute('aria-describedby') ?? '')
    expect(note?.textContent).toBe('A₁: Use a decimal point.')
  })

  it('says in words that a cell is saved', () => {
    render(<Harness />)
    expect(screen.getAllByRole('img', { name: 'saved' })).toHaveLength(2)
  })

  it('has no fields when it is read only', () => {
    render(<Harness isReadOnly />)
    expect(screen.queryAllByRole('textbox')).toEqual([])
    expect(screen.getByText('0.001')).toBeTruthy()
  })
})
