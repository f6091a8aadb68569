import { hasMarkup, type Attribute } from './gerber-attributes'

/** Component names past this many characters are none. */
const longestName = 64

/** What the attributes of a Gerber file say up to where it was read (specification, chapter 5): of the file, of apertures to be defined, of objects. */
export class AttributeState {
  readonly file = new Map<string, string[]>()
  /** The function of the apertures that are defined from here on. */
  aperFunction: string | null = null
  /** The first attribute or comment that holds markup. */
  markup: string | null = null
  private ofComponent: string | null = null
  private ofPin: string | null = null

  /** The component that the objects from here on belong to. */
  get component(): string | null {
    return this.ofPin ?? this.ofComponent
  }

  take({ kind, name, values }: Attribute): void {
    if (this.markup === null && (hasMarkup(name) || values.some(hasMarkup))) this.markup = `${kind}.${name}`.slice(0, 40)
    if (kind === 'TF' && this.file.size < 200) this.file.set(name, values)
    else if (kind === 'TA' && name === '.AperFunction') this.aperFunction = values[0] ?? null
    else if (kind === 'TO' && name === '.C') this.ofComponent = nameOf(values[0])
    else if (kind === 'TO' && name === '.P') this.ofPin = nameOf(values[0])
    else if (kind === 'TD') {
      if (name === '' || name === '.AperFunction') this.aperFunction = null
      if (name === '' || name === '.C') this.ofComponent = null
      if (name === '' || name === '.P') this.ofPin = null
    }
  }
}

const nameOf = (value: string | undefined) => (value === undefined || value === '' || value.length > longestName ? null : value)
