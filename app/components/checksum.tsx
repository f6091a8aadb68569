/** A SHA-256 in groups of eight digits. The gaps are drawn, not written: what is copied has all 64 digits and nothing between. */
export function Checksum({ sha256 }: { sha256: string }) {
  const groups = sha256.match(/.{1,8}/g) ?? []
  return (
    <code className="sha">
      {groups.map((group, i) => (
        <span key={i}>{group}</span>
      ))}
    </code>
  )
}
