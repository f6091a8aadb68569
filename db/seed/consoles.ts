/* The consoles of the demo and how their revisions are told apart. Both, and their maker, are invented. */

export type DemoRevision = { code: string; builtFrom: number; recognise: string }
export type DemoConsole = {
  id: string
  slug: string
  name: string
  maker: string
  kind: 'home' | 'handheld'
  builtFrom: number
  builtTo: number
  summary: string
  revisions: DemoRevision[]
}

export const demoConsoles: readonly DemoConsole[] = [
  {
    id: 'dem0cnse00000001',
    slug: 'talvi-16',
    name: 'Talvi 16',
    maker: 'Talvi',
    kind: 'home',
    builtFrom: 1988,
    builtTo: 1996,
    summary:
      'Home console with game cards. Its 5 V logic rail comes from a linear regulator that runs hot beside a cluster of electrolytic capacitors, which dry out and leak.',
    revisions: [
      {
        code: 'TM-1',
        builtFrom: 1988,
        recognise:
          'The code stands in white beside the card slot. Large finned heat sink over the regulator, screwed from below; the reset button has its own small board on a ribbon.'
      },
      {
        code: 'TM-2',
        builtFrom: 1989,
        recognise:
          'Code beside the card slot. Flat heat sink folded from sheet; a green wire runs from the regulator to the edge of the mainboard.'
      },
      {
        code: 'TM-3',
        builtFrom: 1990,
        recognise:
          'Code moved to the front edge, under the lip of the shield. No added wires; four electrolytic capacitors in a row beside the regulator.'
      },
      {
        code: 'TM-4',
        builtFrom: 1992,
        recognise:
          'Code at the front edge. The video chip lies at the left of the card slot instead of behind it; three electrolytic capacitors in a row and one apart.'
      },
      {
        code: 'TM-5',
        builtFrom: 1993,
        recognise:
          'Code at the front edge, followed by a dot. Shorter mainboard that leaves the rear third of the case empty; power socket on a small board of its own.'
      },
      {
        code: 'TM-6',
        builtFrom: 1995,
        recognise:
          'Code printed on copper under the lower shield, to be read with the shield off. The shield lies 3 mm above the capacitors, lower than in all others.'
      }
    ]
  },
  {
    id: 'dem0cnse00000002',
    slug: 'talvi-pocket',
    name: 'Talvi Pocket',
    maker: 'Talvi',
    kind: 'handheld',
    builtFrom: 1991,
    builtTo: 1999,
    summary:
      'Handheld with game cards. From TP-2 on the screen is lit by a tube lamp whose driver fades; the cards keep saved games with a lithium cell.',
    revisions: [
      {
        code: 'TP-1',
        builtFrom: 1991,
        recognise: 'No lamp: the screen only reflects. The battery door is ribbed, and the code stands under the batteries.'
      },
      {
        code: 'TP-2',
        builtFrom: 1992,
        recognise:
          'Lamp along the upper edge of the screen. Smooth battery door; code under the batteries; the lamp’s plug has four ways.'
      },
      {
        code: 'TP-3',
        builtFrom: 1994,
        recognise: 'Lamp along the upper edge, lamp’s plug with six ways. Code on the mainboard beside the volume wheel.'
      },
      {
        code: 'TP-4',
        builtFrom: 1997,
        recognise:
          'Brighter lamp with a white plug of six ways. Code beside the volume wheel, underlined; the back of the case has a round vent.'
      }
    ]
  }
]
