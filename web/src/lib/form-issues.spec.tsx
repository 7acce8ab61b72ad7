import { render, screen } from '@testing-library/react'
import { Form, Input, type FormInstance } from 'antd'
import { act } from 'react'
import { describe, expect, it } from 'vitest'
import { contractProblems } from './contract-problems'
import { clearProblems, namePathOf, placeProblems } from './form-issues'
import { z } from 'zod'

let form: FormInstance

function StandardsForm() {
  const [made] = Form.useForm()
  form = made
  return (
    <Form form={made}>
      <Form.Item name="name" label="Name">
        <Input />
      </Form.Item>
      <Form.Item name={['standards', 2, 'readings', 0]} label="Reading">
        <Input />
      </Form.Item>
      <Form.Item name={['standards', 2]} label="Standard">
        <Input />
      </Form.Item>
    </Form>
  )
}

const place = (problems: { path: string; message: string }[]): Promise<string[]> =>
  act(async () => placeProblems(form, problems))

describe('namePathOf', () => {
  it('tells steps from positions', () => {
    expect(namePathOf('standards.2.readings.0')).toEqual(['standards', 2, 'readings', 0])
    expect(namePathOf('')).toEqual([])
  })
})

describe('placeProblems', () => {
  it('puts each sentence on its field', async () => {
    render(<StandardsForm />)
    const homeless = await place([
      { path: 'name', message: 'A lot of this name exists.' },
      { path: 'standards.2.readings.0', message: 'Use a decimal point: 0.12.' },
    ])
    expect(homeless).toEqual([])
    expect(form.getFieldError('name')).toEqual(['A lot of this name exists.'])
    expect(form.getFieldError(['standards', 2, 'readings', 0])).toEqual(['Use a decimal point: 0.12.'])
    expect(await screen.findByText('A lot of this name exists.')).toBeTruthy()
  })
  it('moves up to the nearest field there is', async () => {
    render(<StandardsForm />)
    await place([{ path: 'standards.2.lotId', message: 'This lot has expired.' }])
    expect(form.getFieldError(['standards', 2])).toEqual(['This lot has expired.'])
  })
  it('gives back what belongs to no field', async () => {
    render(<StandardsForm />)
    const homeless = await place([
      { path: 'standards.7.readings.0', message: 'nowhere' },
      { path: '', message: 'The batch is closed.' },
    ])
    expect(homeless).toEqual(['nowhere', 'The batch is closed.'])
  })
})

describe('contractProblems', () => {
  const schema = z.object({
    name: z.string().min(1, 'Please fill this in.'),
    kind: z.enum(['stock', 'reagent']),
  })
  it('is silent about a good value', () => {
    expect(contractProblems(schema, { name: 'Iron stock', kind: 'stock' })).toEqual([])
  })
  it('speaks to a person about what is missing', () => {
    expect(contractProblems(schema, {})).toEqual([
      { path: 'name', message: 'Please fill this in.' },
      { path: 'kind', message: 'Please choose one.' },
    ])
  })
})

describe('clearProblems', () => {
  it('takes the complaint off the field that was changed and leaves the others', async () => {
    render(<StandardsForm />)
    await place([
      { path: 'name', message: 'A lot of this name exists.' },
      { path: 'standards.2.readings.0', message: 'Use a decimal point: 0.12.' },
    ])
    await act(async () => clearProblems(form, { standards: { 2: { readings: ['0.12'] } } }))
    expect(form.getFieldError(['standards', 2, 'readings', 0])).toEqual([])
    expect(form.getFieldError('name')).toEqual(['A lot of this name exists.'])
    await act(async () => clearProblems(form))
    expect(form.getFieldError('name')).toEqual([])
  })
})
