import { BoardViewer } from './board-viewer'
import { Table } from '~/components/table'
import type { ReleasePage } from '~/domain/releases/release-page.server'

/** The last part of a path; the whole of it stands in the title. */
const baseName = (path: string) => path.split('/').at(-1) ?? path

const told = { attribute: 'its own attribute', name: 'its name', content: 'its content' } as const
const layerFunctions = ['copper', 'soldermask', 'paste', 'legend', 'outline', 'drill-plated', 'drill-nonplated', 'drill']

/** Copper first, from the top down, then what lies on it, the outline and the drills; top before bottom. */
const stackPlace = (f: ReleasePage['files'][number]) =>
  layerFunctions.indexOf(f.function) * 1000 + (f.layer_index ?? (f.side === 'bottom' ? 500 : 0))

/** The board to look at closely, and which file is which layer. */
export function Layers({ page, number, figure }: { page: ReleasePage; number: number; figure: number }) {
  const layers = page.files.filter((f) => layerFunctions.includes(f.function)).sort((a, b) => stackPlace(a) - stackPlace(b))
  const others = page.files.filter((f) => !layerFunctions.includes(f.function))
  if (page.files.length === 0) return <p className="soft">No file of the bundle could be read.</p>
  return (
    <>
      <BoardViewer page={page} number={figure} />
      <Table
        number={number}
        className="lay"
        caption={`${layers.length} of ${page.files.length} files make the board.`}
        rows={layers}
        rowKey={(f) => f.file}
        isDense
        columns={[
          {
            key: 'layer',
            head: 'Layer',
            weight: 'bold',
            cell: (f) => (f.function === 'copper' && f.layer_index !== null ? `L${f.layer_index}` : '')
          },
          { key: 'file', head: 'File', isRowHead: true, cell: (f) => <span title={f.file}>{baseName(f.file)}</span> },
          { key: 'function', head: 'Function', cell: (f) => f.function },
          { key: 'side', head: 'Side', cell: (f) => f.side ?? '' },
          {
            key: 'told',
            head: 'Told by',
            only: 'sheet',
            weight: 'soft',
            cell: (f) => told[f.evidence as keyof typeof told] ?? f.evidence
          }
        ]}
      />
      {others.length > 0 && (
        <p className="small soft mt-3">
          The other {others.length === 1 ? 'one' : others.length}:{' '}
          {others.map((f) => `${baseName(f.file)} (${f.function})`).join(', ')}.
        </p>
      )}
    </>
  )
}
