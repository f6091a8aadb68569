/**
 * A Content-Disposition that saves a download under `fileName`: in full by RFC 8187, and in plain ASCII for readers that do not know it
 * (RFC 6266, appendix D).
 */
export function attachment(fileName: string): string {
  const plain = fileName.replace(/[^\x20-\x7e]|["\\%]/g, '_')
  const encoded = encodeURIComponent(fileName.replace(/\p{Cs}/gu, '_')).replace(
    /['()*]/g,
    (c) => `%${c.charCodeAt(0).toString(16).toUpperCase()}`
  )
  return plain === fileName ? `attachment; filename="${plain}"` : `attachment; filename="${plain}"; filename*=UTF-8''${encoded}`
}
