/** Lists past this size are none that a person made. */
const largestList = 8 * 1024 * 1024

/** A list, or null where it cannot be read; a defect of ours in its reader counts as that, too, and must not end the check. */
export function listOrNull<T>(bytes: Uint8Array, read: () => T | null): T | null {
  if (bytes.length > largestList) return null
  try {
    return read()
  } catch {
    return null
  }
}
