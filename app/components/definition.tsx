import { Fragment, type ReactNode } from 'react'

export type DefinitionItem = { label: string; value: ReactNode }

/** Label and value, one under the other; `plate` sets them in a row, as on a type plate. */
export function Definitions({ items, layout = 'list' }: { items: DefinitionItem[]; layout?: 'list' | 'plate' }) {
  if (layout === 'plate')
    return (
      <dl className="plate">
        {items.map(({ label, value }) => (
          <div key={label}>
            <dt>{label}</dt>
            <dd>{value}</dd>
          </div>
        ))}
      </dl>
    )
  return (
    <dl className="defs">
      {items.map(({ label, value }) => (
        <Fragment key={label}>
          <dt>{label}</dt>
          <dd>{value}</dd>
        </Fragment>
      ))}
    </dl>
  )
}
