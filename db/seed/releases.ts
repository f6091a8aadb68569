/* What the maintainers wrote about each release of the demo. Dates, details and files come from the manifests. */

export type DemoRelease = {
  board: string
  version: string
  notes: string
  orderNote: string
  withdrawn?: { on: string; by: string; reason: string }
}

const castellated = 'Castellated half-holes on both long edges: no panel tabs there.'
const thin = '0.6 mm board: state the thickness twice, the default of most houses is 1.6 mm.'

export const demoReleases: readonly DemoRelease[] = [
  {
    board: 'buttress',
    version: '0.9.0-beta.2',
    orderNote: castellated,
    notes: `For people who can measure a rail. The power light is fitted in this one so that you can see it from across the bench.

- First open trial; the ripple is not what it should be yet.
- Please report the rail at idle and with a game running.`
  },
  {
    board: 'buttress',
    version: '1.0.0',
    orderNote: castellated,
    notes: `The first release. Against the trial:

- **R1** sets 4.99 V instead of 4.89 V.
- **C13, C14** are a lower-resistance kind; the ripple fell by a third.
- The power light and its resistor are not fitted any more.`
  },
  {
    board: 'buttress',
    version: '1.1.0',
    orderNote: `${castellated} Inner copper 17.5 µm.`,
    notes: `Board revision **B**, four copper layers.

- A ground plane under the converter; the card slot hears less of it.
- **C15** added beside C7. **C11, C12** are smaller and sit closer to the output.
- Boards of revision A cannot take this parts list.

TM-1: L1 meets the heat sink. Not for that one.`
  },
  {
    board: 'buttress',
    version: '1.1.1',
    orderNote: `${castellated} Inner copper 17.5 µm.`,
    notes: `Same copper, same drill. **C7** and **C15** are rated 10 V now: at 6.3 V they had lost more of their capacitance than we like.`
  },
  {
    board: 'buttress',
    version: '2.0.0',
    orderNote: `${castellated} Inner copper 17.5 µm.`,
    notes: `Board revision **C**.

- Clears the heat sink of TM-1.
- **D1** is fitted: a supply of the wrong polarity or voltage costs a diode, not a console.
- One more half-hole pair for ground.

If your boards are of revision A or B there is no need to change them.`
  },
  {
    board: 'sundial',
    version: '1.0.0-beta.1',
    orderNote: thin,
    notes: `Trial on TP-2 and TP-3. A little too bright at the lowest step of the wheel.`
  },
  {
    board: 'sundial',
    version: '1.0.0',
    orderNote: thin,
    notes: `**R1** is 10 Ω: 20 mA instead of 29 mA, and the lowest step of the wheel is dark enough for a night train.`,
    withdrawn: {
      on: '2026-11-18',
      by: 'tomo-reskala',
      reason:
        'The driver overheats with the later lamp’s supply (TP-4): the case gets soft over U1. Do not fit it to TP-4; if you did, switch off and fit 1.2.0. TP-2 and TP-3 run cool, but order 1.2.0 there too.'
    }
  },
  {
    board: 'sundial',
    version: '1.2.0',
    orderNote: thin,
    notes: `Board revision **B**.

- Copper under the driver on both sides, with holes that carry the heat down.
- **C5** steadies the driver with the later lamp's supply, so TP-4 is fine.
- The outline steps back at the screw of TP-3.`
  },
  {
    board: 'almanac',
    version: '1.0.0',
    orderNote: 'One non-plated hole and one non-plated slot.',
    notes: `First release. 32 KiB, no cell. Tried with every card we could borrow.`
  },
  {
    board: 'almanac',
    version: '1.0.1',
    orderNote: 'One non-plated hole and one non-plated slot.',
    notes: `**U2** holds writes off below 4.6 V instead of 4.4 V: one card in twenty lost a byte when the batteries came out in the middle of saving.`
  }
]

export type DemoBatch = {
  board: string
  version: string
  code: string
  madeOn: string
  quantity: number
  builder: string
  assembledBy: string
  note: string
}

const batch = (
  board: string,
  version: string,
  code: string,
  madeOn: string,
  quantity: number,
  builder: string,
  assembledBy: string,
  note = ''
): DemoBatch => ({ board, version, code, madeOn, quantity, builder, assembledBy, note })

const house = 'board house, one-sided assembly'
const hand = 'by hand, stencil and hot plate'

export const demoBatches: readonly DemoBatch[] = [
  batch('buttress', '0.9.0-beta.2', '2022-04', '2022-04-09', 20, 'mirre-oskendal', hand),
  batch('buttress', '1.0.0', '2022-07', '2022-07-02', 60, 'pell-hathrow', house),
  batch('buttress', '1.1.0', '2023-03', '2023-03-25', 100, 'pell-hathrow', house),
  batch('buttress', '1.1.0', '2023-11', '2023-11-18', 120, 'janne-sundquell', house, 'Legend black instead of white.'),
  batch('buttress', '1.1.1', '2023-10', '2023-10-28', 40, 'mirre-oskendal', hand),
  batch(
    'buttress',
    '1.1.1',
    '2024-09',
    '2024-09-14',
    60,
    'pell-hathrow',
    house,
    'C13, C14 from another reel of the listed part.'
  ),
  batch('buttress', '2.0.0', '2024-11', '2024-11-23', 100, 'janne-sundquell', house),
  batch('sundial', '1.0.0-beta.1', '2022-07', '2022-07-04', 16, 'mirre-oskendal', hand),
  batch('sundial', '1.0.0', '2022-10', '2022-10-01', 120, 'janne-sundquell', house),
  batch('sundial', '1.2.0', '2024-02', '2024-02-03', 100, 'janne-sundquell', house),
  batch('sundial', '1.2.0', '2025-01', '2025-01-18', 100, 'pell-hathrow', house),
  batch('almanac', '1.0.0', '2021-12', '2021-12-18', 40, 'mirre-oskendal', 'by hand, stencils on both sides'),
  batch('almanac', '1.0.1', '2022-09', '2022-09-10', 80, 'pell-hathrow', 'board house, assembly on both sides')
]

/** What the maintainers answer to a caution of the bundle check, by its code. */
export const cautionAnswers: Record<string, string> = {
  'bom-not-placed':
    'Meant so: pads for trials. All of them are marked “not fitted”. Leave them off; do not let the board house ask.',
  'copper-past-outline': 'Meant so: half-holes on both long edges, cut by the outline. Castellated; allow no panel tabs there.',
  'drill-format-assumed': 'Read right: metric, decimal points. The next release will say so in the file.',
  'layer-unknown': 'For people, not for the board house. Ignore that file when ordering.',
  'layer-conflict': 'The file’s own attribute is right; the name is a habit of the drawing program.',
  'paste-missing': 'No part of that side is placed by machine.',
  'legend-missing': 'Meant so: there is no room for a legend on that side.',
  'thickness-missing': 'The order details say it.',
  'source-missing': 'The source is in the next release; ask me for this one.',
  'licence-missing': 'The licence is the one named on the board’s page.',
  'bom-cell-unsafe': 'A value that begins with a sign. It is text.',
  'placement-mirrored': 'The bottom side is written mirrored; turn it when loading.',
  'zip-name-odd': 'Harmless; the next release has plain names.',
  'zip-nested': 'A copy of the drawing program’s own archive. Not needed for ordering.'
}
