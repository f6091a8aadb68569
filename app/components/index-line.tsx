export type IndexEntry = { number: number; word: string; id?: string }

/** "1 Board 2 Fit …": the sections of a long page, right under its head. */
export function IndexLine({ entries }: { entries: IndexEntry[] }) {
  return (
    <nav className="idx" aria-label="On this page">
      {entries.map(({ number, word, id }) => (
        <a key={number} href={`#${id ?? `s${number}`}`}>
          <i>{number}</i>
          {word}
        </a>
      ))}
    </nav>
  )
}
