/** One metal of the job: what it is measured by, whose samples are taken, and what they truly hold. */
export interface Metal {
  name: string
  methodCode: string
  methodTitle: string
  determination: string
  wavelengthNm: number
  cellPathCm: string
  reagents: string[]
  colourMinutes: number
  preservation: 'None' | 'Nitric acid'
  ph: string
  temperatureC: string
  client: { label: string; person: string; alertsTo: string; certificatesTo: string }
  /** true concentrations, mg/L: constructed, one on each side of the limit */
  below: { point: string; mgPerL: number }
  above: { point: string; mgPerL: number; limit: string }
  /** how the readings get into the run sheet */
  entered: 'typed' | 'pasted' | 'xlsx' | 'csv'
  technician: number
  isSentBackFirst?: boolean
}

export const METALS: Metal[] = [
  {
    name: 'iron',
    methodCode: 'fe-phenanthroline',
    methodTitle: 'Iron by 1,10-phenanthroline',
    determination: 'Iron, total',
    wavelengthNm: 510,
    cellPathCm: '1',
    reagents: ['1,10-phenanthroline solution', 'Acetate buffer'],
    colourMinutes: 20,
    preservation: 'Nitric acid',
    ph: '1.6',
    temperatureC: '5.0',
    client: {
      label: 'PH · Pellam Hills Water Board',
      person: 'dora.whitlock@pellamhills.example',
      alertsTo: 'operations@pellamhills.example',
      certificatesTo: 'dora.whitlock@pellamhills.example',
    },
    below: { point: 'PH-03 · Well 3', mgPerL: 0.18 },
    above: { point: 'PH-05 · Well 5', mgPerL: 0.62, limit: '0.3' },
    entered: 'typed',
    technician: 0,
    isSentBackFirst: true,
  },
  {
    name: 'copper',
    methodCode: 'cu-bathocuproine',
    methodTitle: 'Copper by bathocuproine disulfonate',
    determination: 'Copper, total',
    wavelengthNm: 484,
    cellPathCm: '1',
    reagents: ['Bathocuproine disulfonate solution', 'Citrate buffer'],
    colourMinutes: 15,
    preservation: 'Nitric acid',
    ph: '1.7',
    temperatureC: '6.0',
    client: {
      label: 'TH · Thistle Heights Metropolitan District',
      person: 'callum.reyes@thistleheights.example',
      alertsTo: 'control@thistleheights.example',
      certificatesTo: 'callum.reyes@thistleheights.example',
    },
    below: { point: 'TH-01 · Summit works outlet', mgPerL: 0.41 },
    above: { point: 'TH-02 · Parade tap', mgPerL: 1.72, limit: '1.3' },
    entered: 'pasted',
    technician: 1,
  },
  {
    name: 'manganese',
    methodCode: 'mn-persulfate',
    methodTitle: 'Manganese by persulfate oxidation to permanganate',
    determination: 'Manganese, total',
    wavelengthNm: 525,
    cellPathCm: '5',
    reagents: ['Silver and mercury reagent', 'Ammonium persulfate'],
    colourMinutes: 30,
    preservation: 'Nitric acid',
    ph: '1.5',
    temperatureC: '5.5',
    client: {
      label: 'DM · Dunmarrow District Water',
      person: 'silas.penrose@dunmarrow.example',
      alertsTo: 'duty@dunmarrow.example',
      certificatesTo: 'silas.penrose@dunmarrow.example',
    },
    below: { point: 'DM-02 · North borehole', mgPerL: 0.02 },
    above: { point: 'DM-01 · Works outlet', mgPerL: 0.21, limit: '0.05' },
    entered: 'xlsx',
    technician: 2,
  },
  {
    name: 'chromium(VI)',
    methodCode: 'cr6-diphenylcarbazide',
    methodTitle: 'Chromium(VI) by 1,5-diphenylcarbazide',
    determination: 'Chromium(VI)',
    wavelengthNm: 540,
    cellPathCm: '1',
    reagents: ['1,5-diphenylcarbazide in acetone'],
    colourMinutes: 6,
    preservation: 'None',
    ph: '7.4',
    temperatureC: '4.0',
    client: {
      label: 'KR · Keld River Treatment Company',
      person: 'odile.farrant@keldriver.example',
      alertsTo: 'process@keldriver.example',
      certificatesTo: 'odile.farrant@keldriver.example',
    },
    below: { point: 'KR-03 · After filters', mgPerL: 0.04 },
    above: { point: 'KR-01 · Intake', mgPerL: 0.23, limit: '0.1' },
    entered: 'csv',
    technician: 1,
  },
]
