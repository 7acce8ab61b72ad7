import { render, screen, within } from '@testing-library/react'
import userEvent from '@testing-library/user-event'
import { MemoryRouter, Route, Routes } from 'react-router-dom'
import { describe, expect, it } from 'vitest'
import { DataTable, type Column } from './data-table'

interface Row {
  id: string
  number: string
  iron: string
}
// constructed
const rows: Row[] = [
  { id: '1', number: 'S-26-04117', iron: '12.5' },
  { id: '2', number: 'S-26-04118', iron: '<0.010' },
  { id: '3', number: 'S-26-04119', iron: '3' },
]
const columns: Column<Row>[] = [
  { key: 'number', title: 'Number', text: (row) => row.number },
  { key: 'iron', title: 'Iron', unit: 'mg/L', kind: 'number', text: (row) => row.iron },
]

function show(shown: Row[]) {
  return render(
    <MemoryRouter>
      <Routes>
        <Route
          path="/"
          element={
            <DataTable
              label="Samples"
              rows={shown}
              columns={columns}
              rowKey={(row) => row.id}
              rowTo={(row) => `/samples/${row.id}`}
              empty={{ title: 'No samples yet' }}
            />
          }
        />
        <Route path="/samples/:id" element={<p>the sample’s page</p>} />
      </Routes>
    </MemoryRouter>,
  )
}

describe('DataTable', () => {
  it('pads numbers with unseen figures so that their points stand in one line', () => {
    show(rows)
    const padOf = (text: string) =>
      screen.getByRole('cell', { name: new RegExp(text) }).querySelector('[aria-hidden]')?.textContent ?? ''
    expect(padOf('12.5')).toBe('00')
    expect(padOf('<0.010')).toBe('')
    expect(padOf('^3')).toBe('.000')
  })
  it('leads from a row to its page, by the link and by a click anywhere', async () => {
    show(rows)
    expect(screen.getByRole('link', { name: 'S-26-04118' }).getAttribute('href')).toBe('/samples/2')
    await userEvent.click(screen.getByText('<0.010'))
    expect(screen.getByText('the sample’s page')).toBeTruthy()
  })
  it('says kindly that there is nothing, with its heads in place', () => {
    show([])
    expect(screen.getByText('No samples yet')).toBeTruthy()
    expect(within(screen.getByRole('table')).getAllByRole('columnheader')).toHaveLength(2)
  })
  it('hands each value its label, for the blocks that a phone makes of the rows of a wide table', () => {
    const wide: Column<Row>[] = [
      ...columns,
      { key: 'id', title: <span>Id</span>, label: 'Identity', text: (row) => row.id },
      { key: 'none', title: 'Nothing', text: () => null },
    ]
    render(
      <MemoryRouter>
        <DataTable
          label="Wide"
          rows={rows}
          columns={wide}
          rowKey={(row) => row.id}
          empty={{ title: 'None' }}
        />
        <DataTable
          label="Three"
          rows={rows}
          columns={wide.slice(0, 3)}
          rowKey={(row) => row.id}
          empty={{ title: 'None' }}
        />
      </MemoryRouter>,
    )
    const table = screen.getByRole('table', { name: 'Wide' })
    expect(table.classList.contains('is-list')).toBe(true)
    expect(screen.getByRole('table', { name: 'Three' }).classList.contains('is-list')).toBe(false)
    const [, first] = within(table).getAllByRole('row')
    const cells = first ? within(first).getAllByRole('cell') : []
    expect(cells.map((cell) => cell.dataset['label'])).toEqual([
      'Number',
      'Iron, mg/L',
      'Identity',
      'Nothing',
    ])
    // what is empty is left out there
    expect(cells.map((cell) => cell.querySelector('.table-value:empty') !== null)).toEqual([
      false,
      false,
      false,
      true,
    ])
  })
})
