import { z } from 'zod'
import { decodeText } from './read-table'

const length = z.number().finite().nonnegative().max(10_000).optional().catch(undefined)

const schema = z.object({
  GeneralSpecs: z.object({
    LayerNumber: z.number().int().min(1).max(200).optional().catch(undefined),
    BoardThickness: length,
    Size: z.object({ X: length, Y: length }).optional().catch(undefined)
  })
})

/** What a Gerber job file states about the board; lengths in mm. */
export type JobFile = { copperLayers: number | null; thickness: number | null }

/** A Gerber job file; null when it is none. Source: Gerber Job File Format Specification 2021.11 (JSON, lengths in mm). */
export function readJob(bytes: Uint8Array): JobFile | null {
  if (bytes.length > 1024 * 1024) return null
  let content: unknown
  try {
    content = JSON.parse(decodeText(bytes))
  } catch {
    return null
  }
  const job = schema.safeParse(content)
  if (!job.success) return null
  const { LayerNumber, BoardThickness } = job.data.GeneralSpecs
  return { copperLayers: LayerNumber ?? null, thickness: BoardThickness ? BoardThickness : null }
}
