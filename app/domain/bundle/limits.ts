const mib = 1024 * 1024

/** Everything that bounds a check. Sizes in bytes, time in milliseconds; all of it can be set for tests or a larger site. */
export type CheckLimits = {
  zipBytes: number
  totalBytes: number
  fileBytes: number
  entries: number
  /** Largest allowed unpacked/packed ratio of files above `ratioFrom` bytes. */
  ratio: number
  ratioFrom: number
  pathLength: number
  pathDepth: number
  /** Drawn objects of one Gerber file, step-and-repeat and block apertures counted out. */
  gerberObjects: number
  /** Primitives evaluated for aperture macros in one file, and primitives times flashes. */
  macroPrimitives: number
  macroShapes: number
  apertures: number
  blockDepth: number
  /** Longest single statement of a Gerber file (a comment of megabytes is no comment). */
  statementBytes: number
  drillHoles: number
  outlinePaths: number
  listRows: number
  listCells: number
  /** Designators of one bill of materials, ranges counted out. */
  designators: number
  /** Findings of one code; what is past it is counted in the last one's message. */
  findingsPerCode: number
  /** Of one picture. */
  pictureBytes: number
  /** Drawn objects of both sides together, and of one single layer. */
  pictureObjects: number
  /** Single layers that are drawn, and the bytes and objects of all of them. */
  layerPictures: number
  layerPictureBytes: number
  layerPictureObjects: number
  /** From the order to the answer; and from the answer to the last picture. */
  wallMs: number
  drawMs: number
  heapMib: number
}

export const defaultLimits: CheckLimits = {
  zipBytes: 64 * mib,
  totalBytes: 512 * mib,
  fileBytes: 64 * mib,
  entries: 2000,
  ratio: 200,
  ratioFrom: mib,
  pathLength: 240,
  pathDepth: 10,
  gerberObjects: 500_000,
  macroPrimitives: 100_000,
  macroShapes: 4_000_000,
  apertures: 20_000,
  blockDepth: 16,
  statementBytes: mib,
  drillHoles: 200_000,
  outlinePaths: 100_000,
  listRows: 20_000,
  listCells: 400_000,
  designators: 50_000,
  findingsPerCode: 20,
  pictureBytes: 4 * mib,
  pictureObjects: 100_000,
  layerPictures: 64,
  layerPictureBytes: 24 * mib,
  layerPictureObjects: 300_000,
  wallMs: 20_000,
  drawMs: 20_000,
  heapMib: 512
}
