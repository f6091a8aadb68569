const most = 14

/** A group's name as short as a drawing can carry, still different from the others'. */
export function chartName(groups: readonly { name: string }[], index: number): string {
  const short = (name: string) => (name.length <= most ? name : `${[...name].slice(0, most - 1).join('')}…`)
  const own = short(groups[index]!.name)
  const isAlone = groups.every(({ name }, i) => i === index || short(name) !== own)
  return isAlone ? own : `${[...own].slice(0, most - 4).join('')} (${index + 1})`
}
