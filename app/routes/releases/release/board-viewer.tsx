import { useLocation } from 'react-router'
import { numberPlaces, type NumberedPlace } from '~/components/finding-places'
import { LayerViewer } from '~/components/layer-viewer'
import { describeFinding } from '~/domain/bundle/describe-finding'
import type { FindingCode } from '~/domain/bundle/finding-codes'
import type { ReleasePage } from '~/domain/releases/release-page.server'

/** Where the viewer stands on the page. */
export const boardViewer = 'board-viewer'

/** For each finding its balloon's number and place on a picture; null where it has none. */
export const numberedPlaces = ({ findings, pictureBox }: ReleasePage): (NumberedPlace | null)[] =>
  pictureBox === null
    ? []
    : numberPlaces(
        findings.map(({ place }) => place),
        pictureBox
      )

export const hasViewer = ({ pictureBox, pictures, layerPictures }: ReleasePage): boolean =>
  pictureBox !== null && (pictures.top !== null || pictures.bottom !== null || layerPictures.length > 0)

/** Both sides and every layer, to look at closely; or why they cannot be. */
export function BoardViewer({ page, number }: { page: ReleasePage; number: number }) {
  const { search } = useLocation()
  const { board, release, pictureBox, pictures, layerPictures, findings } = page
  if (!pictureBox || !hasViewer(page))
    return (
      <p className="soft" id={boardViewer}>
        The layers could not be drawn, so there is nothing to look at here. What was measured and found still stands: it is read
        from the files, not from pictures.
      </p>
    )
  const marks = numberedPlaces(page).flatMap((numbered, i) => {
    if (!numbered) return []
    const { title } = describeFinding(findings[i]!.code as FindingCode)
    const { x, y, side } = numbered.place
    return [{ number: numbered.number, x, y, side, href: `#f${i + 1}`, label: `Place ${numbered.number}: ${title}` }]
  })
  const isWithoutSides = pictures.top === null && pictures.bottom === null
  return (
    <LayerViewer
      key={`${release.version} ${layerPictures.map(({ src }) => src).join(' ')}`}
      id={boardViewer}
      number={number}
      caption={
        <>
          {isWithoutSides && 'The finished sides could not be drawn; what was measured still stands. '}
          {marks.length > 0 && 'Numbers are places of findings. '}Places are counted in mm from 0, 0 of the layers.
        </>
      }
      name={`${board.name} ${release.version}`}
      extent={pictureBox}
      pictures={pictures}
      layers={layerPictures}
      marks={marks}
      asked={search}
    />
  )
}
