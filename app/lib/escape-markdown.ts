/**
 * A text as it stands, for the middle of a line of Markdown (CommonMark with GitHub's additions): nothing in it can mark up, link, or break the
 * line. Underscores within words stay bare, so that names stay readable in the source. Not for the start of a line.
 */
export function escapeMarkdown(text: string): string {
  return text
    .replace(/[\p{Cc}\u2028\u2029]+/gu, ' ')
    .replace(/[\u200e\u200f\u202a-\u202e\u2066-\u2069]/g, '')
    .replace(/[\\`*[\]<>&~|@]/g, '\\$&')
    .replace(/(?<![A-Za-z0-9])_|_(?![A-Za-z0-9])/g, '\\_')
    .replace(/:(?=\/\/)/g, '\\:')
    .replace(/(www)\./gi, '$1\\.')
}
