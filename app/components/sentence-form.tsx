import type { ReactNode } from 'react'
import { Button } from './button'
import { FieldMessage, SelectOptions, type SelectGroup, type SelectOption } from './field'

export type SentencePart =
  | string
  | { name: string; label: string; options: (SelectOption | SelectGroup)[]; value?: string; empty?: string; error?: string }
  | {
      name: string
      label: string
      type: 'text' | 'search' | 'date'
      value?: string
      size?: number
      list?: string
      error?: string
    }

export type SentenceFormProps = {
  action: string
  /** What the form is for, read out: "What fits my console". */
  label: string
  /** "I have a", a select, "revision", a select … */
  parts: SentencePart[]
  submit: string
  isOutlined?: boolean
  span?: 'wide' | 'full'
  /** Hidden fields, or further words before the button. */
  children?: ReactNode
}

/** A question put as a sentence; on a phone its words become the label column. Its answer is an address. */
export function SentenceForm({ action, label, parts, submit, isOutlined, span, children }: SentenceFormProps) {
  return (
    <form className={span ? `say ${span}` : 'say'} action={action} method="get" aria-label={label}>
      {pairsOf(parts).map(({ words, gap }, i) => (
        <span className="pair" key={i}>
          {words && <span>{words}</span>}
          {gap && <Gap part={gap} />}
        </span>
      ))}
      {parts.map((part) =>
        typeof part !== 'string' && part.error ? (
          <div key={part.name} className="col-span-full basis-full">
            <FieldMessage id={`${part.name}-error`}>{`${part.label}: ${part.error}`}</FieldMessage>
          </div>
        ) : null
      )}
      {children}
      <Button kind={isOutlined ? 'outline' : 'solid'}>{submit}</Button>
    </form>
  )
}

type GapPart = Exclude<SentencePart, string>

/** Each gap with the words before it: a line never ends between them. */
function pairsOf(parts: SentencePart[]): { words?: string; gap?: GapPart }[] {
  const pairs: { words?: string; gap?: GapPart }[] = []
  for (const part of parts) {
    const last = pairs.at(-1)
    if (typeof part === 'string') pairs.push({ words: part })
    else if (last && !last.gap) last.gap = part
    else pairs.push({ gap: part })
  }
  return pairs
}

function Gap({ part }: { part: GapPart }) {
  const wiring = {
    id: part.name,
    'aria-invalid': part.error ? (true as const) : undefined,
    'aria-describedby': part.error ? `${part.name}-error` : undefined
  }
  if ('options' in part)
    return (
      <select {...wiring} name={part.name} aria-label={part.label} defaultValue={part.value ?? ''}>
        {part.empty !== undefined && <option value="">{part.empty}</option>}
        <SelectOptions options={part.options} />
      </select>
    )
  return (
    <input
      {...wiring}
      type={part.type}
      name={part.name}
      aria-label={part.label}
      defaultValue={part.value}
      size={part.size}
      list={part.list}
    />
  )
}
