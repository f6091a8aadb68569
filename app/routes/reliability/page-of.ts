export type PageOf<Row> = { rows: Row[]; page: number; total: number }

/** One page of a list by its number in an address; numbers that make no sense lead to the first page, too large ones to the last. */
export function pageOf<Row>(rows: readonly Row[], asked: string | null, size: number): PageOf<Row> {
  const pages = Math.max(1, Math.ceil(rows.length / size))
  const page = Math.min(pages, Math.max(1, Math.trunc(Number(asked)) || 1))
  return { rows: rows.slice((page - 1) * size, page * size), page, total: rows.length }
}
