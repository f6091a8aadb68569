import type { Random } from './random'
import type { UnitStory } from './simulate-unit'
import type { FailureCause } from './truth'

/* What people write in the free-text fields of their reports. Invented. */

const fitted: Record<string, readonly string[]> = {
  buttress: [
    'Rail at 4.99 V idle and with a game running. Ripple 12 mV.',
    'Old capacitors had leaked; cleaned with isopropanol, two tracks mended with wire.',
    'Cool to the touch after an hour. The old regulator burnt fingers.',
    '4.98 V at the card slot. The picture no longer wavers.',
    'Ground pads took a lot of heat; preheated to 120 °C.',
    'No reset when warm any more. Two hours of play.',
    'Shield back on, checked for clearance with paper.',
    ''
  ],
  sundial: [
    'Even light, no hum from the driver.',
    '19.8 mA through the LEDs at full brightness.',
    'The lowest step of the wheel is dark enough.',
    'Light guide cleaned while it was open.',
    'Case closes without pressure; board measured 0.61 mm.',
    ''
  ],
  almanac: [
    'Saved, batteries out for a night, all there.',
    'Old cell read 1.9 V. Save read out first and written back.',
    'Both sides soldered by hand; the slot clears the post of the shell.',
    ''
  ]
}

const failed: Record<FailureCause, readonly string[]> = {
  board: [
    'Measured at the board: its output is gone, the input is there.',
    'Swapped for another board, and the console works.',
    ''
  ],
  fitting: ['A half-hole had cracked off its pad. Soldered again, works.', 'Solder bridge under the edge, seen with a lens.', ''],
  'other-fault': [
    'Something else in the console: the board still makes its voltage.',
    'Power switch worn out. The board is fine.',
    ''
  ],
  'wrong-diagnosis': [
    'The fault was elsewhere from the start; the board changes nothing.',
    'Should have measured first. Same symptom as before.'
  ],
  accident: ['Dropped.', 'A wrong supply was plugged in.', 'Drink spilled over it.'],
  unknown: ['Dead. I have not opened it.', 'Stopped overnight, cause not found.']
}

/** A note for the report of a unit. */
export function reportNote(random: Random, story: UnitStory): string {
  if (story.firstPower !== 'works') return random.pick(failed[story.failure!.cause])
  return random.pick(fitted[story.kind.board]!)
}

/** A note for a later statement. */
export function statementNote(random: Random, statement: 'running' | 'failed' | 'parted', cause: FailureCause | null): string {
  if (statement === 'failed') return random.pick(failed[cause ?? 'unknown'])
  if (statement === 'parted')
    return random.pick(['Sold with the console, working.', 'Given away, it ran to the last day.', 'Lost when moving house.'])
  return random.pick(['', '', '', 'Still good.', 'Runs every week.', 'Switched on for this: fine.'])
}
