// Marks of the trade, common practice, no source. `NF`, `NC` and `NP` alone are left out: they can mean nanofarads, no connection, a dielectric.
const mark =
  'dnp|dnf|dni|dnm|dns|do[ -]?not[ -]?(?:populate|fit|place|mount|install|stuff|assemble)|not?[ -]?(?:fitted|populated|placed|mounted|installed|stuffed|assembled|fit|pop)|unfitted|unpopulated|nicht[ -]best(?:ü|ue)c?k(?:t|en)|nicht[ -]einbauen|non[ -]mont(?:é|e)e?|ne[ -]pas[ -](?:monter|c(?:â|a)bler)'
const anywhere = new RegExp(`(?<![\\p{L}\\p{N}])(?:${mark})(?![\\p{L}\\p{N}])`, 'iu')
const atStart = new RegExp(`^[\\s([{<*]*(?:${mark})(?![\\p{L}\\p{N}])`, 'iu')
const inBrackets = new RegExp(`[([{<]\\s*(?:${mark})\\s*[)\\]}>]`, 'iu')

/** Whether a value says that its part is not fitted: `DNP`, `100n DNP`, `10k (not fitted)`. */
export const isValueNotFitted = (value: string): boolean => anywhere.test(value.slice(0, 500))

/** Whether a description says so, at its start or in brackets; in a sentence the words may speak of something else. */
export const isDescriptionNotFitted = (description: string): boolean =>
  atStart.test(description.slice(0, 500)) || inBrackets.test(description.slice(0, 500))

const withJoint = new RegExp(`${anywhere.source}(?: ?[-_:/](?=[\\p{L}\\p{N}]))?`, 'giu')

/** A value without its not-fitted mark. */
export const withoutNotFittedMark = (value: string): string => value.replace(withJoint, ' ')
