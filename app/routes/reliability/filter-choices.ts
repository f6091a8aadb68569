import type { SelectGroup, SelectOption } from '~/components/field'
import { batchName } from '~/domain/reliability/reliability-filters'
import type { FilterFormProps } from './filled-filter'

/** So many batches are listed to choose from. */
const batchesListed = 200

type Has = {
  releases: readonly { version: string; state: string; board_revision: string }[]
  revisions: readonly { code: string }[]
  batches: readonly { version: string; code: string; made_on: string; quantity: number }[]
}

/** What the form offers: of the batches those of the release chosen, or the newest, and always the one that is chosen. */
export function filterChoices(
  { releases, revisions, batches }: Has,
  chosen: { release: string | null; batch: string | null }
): FilterFormProps['choices'] {
  const ofRelease = chosen.release === null ? batches : batches.filter((b) => b.version === chosen.release)
  const listed = ofRelease.filter((b, i) => i < batchesListed || batchName(b) === chosen.batch)
  return {
    releases: releases.map((r) => ({
      value: r.version,
      label: r.state === 'released' ? r.version : `${r.version}, ${r.state}`
    })),
    revisions: revisions.map(({ code }) => ({ value: code, label: code })),
    boardRevisions: [...new Set(releases.map((r) => r.board_revision))]
      .sort()
      .map((letter) => ({ value: letter, label: `board revision ${letter}` })),
    batches: { groups: byRelease(listed), isCutOff: listed.length < ofRelease.length }
  }
}

function byRelease(batches: Has['batches']): SelectGroup[] {
  const groups = new Map<string, SelectOption[]>()
  for (const batch of batches) {
    const options = groups.get(batch.version) ?? []
    groups.set(batch.version, options)
    options.push({ value: batchName(batch), label: `${batch.code}, ${batch.quantity} made ${batch.made_on}` })
  }
  return [...groups].map(([version, options]) => ({ heading: `Release ${version}`, options }))
}
