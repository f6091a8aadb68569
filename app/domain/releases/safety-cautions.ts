/** Common practice at the bench, no source; each defers to local rules, the maker's service information and qualified people. */
export type SafetyCaution = { heading: string; text: string }

const stored: SafetyCaution = {
  heading: 'Mains and stored charge',
  text: 'The console’s supply works on mains voltage and keeps its charge after the plug is out. Unplug it, wait, then measure before you touch anything. Work on the mains side is for qualified people; follow your local electrical rules and the maker’s service information.'
}
const cell: SafetyCaution = {
  heading: 'Lithium cell',
  text: 'Take the battery out before you open the console, and keep hot tools and loose metal away from it. Leave a swollen, hot or damaged cell alone and ask a qualified person; follow your local rules for its disposal.'
}
const solder: SafetyCaution = {
  heading: 'Hot tools, fumes and leaded solder',
  text: 'Old boards often carry leaded solder, and flux fumes harm. Air the room, keep food away, wash your hands, and put the iron where nobody can touch it.'
}

/** What to read before taking the files of a board for this kind of console. */
export const safetyCautions = (kind: 'home' | 'handheld'): SafetyCaution[] => [kind === 'home' ? stored : cell, solder]
