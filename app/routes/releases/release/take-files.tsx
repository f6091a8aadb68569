import { Actions, ButtonLink } from '~/components/button'
import { Checksum } from '~/components/checksum'
import { Definitions } from '~/components/definition'
import { MarginNote } from '~/components/section'
import { Warning } from '~/components/warning'
import type { ReleasePage } from '~/domain/releases/release-page.server'
import { releasePath } from '~/domain/releases/release-path'
import { safetyCautions } from '~/domain/releases/safety-cautions'
import { exactBytes } from '~/lib/byte-size'

/** The bundle to download. The cautions stand before the button. */
export function TakeFiles({ page }: { page: ReleasePage }) {
  const { board, release, bundle, files } = page
  if (!bundle) return null
  const cautions = page.findings.filter((f) => f.severity === 'caution').length
  const path = `${releasePath(board.slug, release.version)}/bundle`
  return (
    <>
      {safetyCautions(board.consoleKind).map(({ heading, text }) => (
        <Warning key={heading} severity="caution" heading={heading}>
          {text}
        </Warning>
      ))}
      {cautions > 0 && (
        <Warning
          severity="note"
          heading={cautions === 1 ? 'One finding to know before ordering' : `${cautions} findings to know before ordering`}
        >
          <p>
            The check raised {cautions === 1 ? 'a caution' : 'cautions'}, answered by the maintainer: <a href="#s5">section 5</a>.
            Pass on to the board house what concerns it.
          </p>
        </Warning>
      )}
      <Actions isWide>
        <ButtonLink href={path} download={bundle.fileName} kind={release.state === 'withdrawn' ? 'outline' : 'solid'}>
          Download {bundle.fileName}
        </ButtonLink>
      </Actions>
      <Definitions
        items={[
          { label: 'Size', value: `${exactBytes(bundle.bytes)}, ${files.length} files` },
          { label: 'SHA-256', value: <Checksum sha256={bundle.sha256} /> },
          { label: 'Licence', value: board.licence },
          { label: 'Taken', value: page.downloaded === 1 ? 'once so far' : `${page.downloaded} times so far` }
        ]}
      />
      <MarginNote>
        <p>
          <b>Check what you took.</b> The sum you compute over the zip must be this one, all 64 digits. Copying it leaves the gaps
          out.
        </p>
      </MarginNote>
    </>
  )
}
