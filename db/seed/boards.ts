/* The boards of the demo: what they replace, where they fit, who looks after them. Invented, like all of it. */

export type FitWord = 'fits' | 'fits-with-care' | 'does-not-fit' | 'untested'
export type DemoBoard = {
  id: string
  slug: string
  name: string
  console: string
  summary: string
  replaces: string
  licence: string
  openedOn: string
  owner: string
  maintainers: string[]
  description: string
  /** Letter pair before a unit's number on its tag. */
  tagPrefix: string
  fit: Record<string, { claim: FitWord; reason: string }>
}

export const demoBoards: readonly DemoBoard[] = [
  {
    id: 'dem0bard00000001',
    slug: 'buttress',
    name: 'Buttress',
    console: 'talvi-16',
    summary: '5 V rail in place of leaking capacitors and a hot regulator.',
    replaces: 'The electrolytic cluster and the linear regulator on the 5 V logic rail of the Talvi 16',
    licence: 'CERN-OHL-P-2.0',
    openedOn: '2022-03-05',
    owner: 'ilse-varnik',
    maintainers: ['tomo-reskala'],
    tagPrefix: 'BU',
    description: `Buttress takes the place of the leaking electrolytic cluster and of the hot linear regulator on the 5 V logic rail. A buck converter makes the rail, and a network of ceramic and polymer capacitors keeps its impedance below that of the parts it replaces.

It is soldered to the old parts' pads by the half-holes on both long edges.

## Before you fit it

- Clean up what leaked. Electrolyte under the old capacitors eats tracks; check the ground plane around them for continuity before a new part goes on.
- Measure the rail first. If 5 V is there and quiet, this board will not cure your fault.
- The supply keeps its charge after the plug is out. Wait, then measure, before you touch the rail.

## What it does not do

It does not mend the 9 V audio rail, and it does not help when the video chip itself is dead.`,
    fit: {
      'TM-1': { claim: 'fits-with-care', reason: 'L1 meets the heat sink up to 1.1.1. Take 2.0.0.' },
      'TM-2': { claim: 'fits', reason: 'Take off the green wire: the board carries it.' },
      'TM-3': { claim: 'fits', reason: 'Drawn on this revision.' },
      'TM-4': { claim: 'untested', reason: 'Not on the maintainer’s own bench yet; see the reports.' },
      'TM-5': { claim: 'fits', reason: 'Tried on three consoles.' },
      'TM-6': { claim: 'fits-with-care', reason: 'Insulate C13, C14: lower shield.' }
    }
  },
  {
    id: 'dem0bard00000002',
    slug: 'sundial',
    name: 'Sundial',
    console: 'talvi-pocket',
    summary: 'Backlight driver and six LEDs, drop-in for the lamp.',
    replaces: 'The tube lamp and its driver in the Talvi Pocket',
    licence: 'CERN-OHL-P-2.0',
    openedOn: '2022-06-04',
    owner: 'tomo-reskala',
    maintainers: [],
    tagPrefix: 'SU',
    description: `Sundial lies where the tube lamp lay: six white LEDs in series along the light guide, and a boost driver that follows the console's own brightness wheel.

## Before you fit it

- Lift the old lamp with its holder. The tube may hold a little mercury: do not break it, and hand it in where your local rules say.
- The old driver works with several hundred volts. Unplug the batteries and wait before you touch it.
- 0.6 mm board: check the thickness of what the board house sent before you close the case.`,
    fit: {
      'TP-1': { claim: 'does-not-fit', reason: 'No lamp to replace: the screen only reflects.' },
      'TP-2': { claim: 'fits', reason: 'Use the four middle ways of the plug.' },
      'TP-3': { claim: 'fits', reason: 'Drawn on this revision.' },
      'TP-4': { claim: 'fits-with-care', reason: '1.2.0 only. 1.0.0 overheats with the later lamp’s supply.' }
    }
  },
  {
    id: 'dem0bard00000003',
    slug: 'almanac',
    name: 'Almanac',
    console: 'talvi-pocket',
    summary: 'Save memory that needs no battery.',
    replaces: 'The battery-backed save memory of Talvi game cards',
    licence: 'CERN-OHL-P-2.0',
    openedOn: '2021-11-06',
    owner: 'odile-marrenth',
    maintainers: [],
    tagPrefix: 'AL',
    description: `Almanac replaces a game card's save memory and its lithium cell by non-volatile memory with a supervisor, so that nothing runs down.

## Before you fit it

- What is saved on the card is lost with the old memory. Read it out first if you can.
- Take the lithium cell out before anything gets hot: heated cells can burst. Hand it in where your local rules say.
- Parts sit on both sides: solder the memory side first.`,
    fit: {
      'TP-1': { claim: 'fits', reason: 'Cards are the same for all.' },
      'TP-2': { claim: 'fits', reason: 'Cards are the same for all.' },
      'TP-3': { claim: 'fits', reason: 'Tried on twelve cards.' },
      'TP-4': { claim: 'fits', reason: 'Cards are the same for all.' }
    }
  }
]
