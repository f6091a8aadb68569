import type { Declared } from './declared-beside-measured'
import type { ReleaseRow } from './releases.repo.server'

type DeclaredRow = Pick<
  ReleaseRow,
  | 'declared_layers'
  | 'declared_thickness_mm'
  | 'declared_copper_um'
  | 'declared_finish'
  | 'declared_mask'
  | 'declared_legend'
  | 'declared_stencil'
>

/** What a stored release declares. */
export const declaredOf = (release: DeclaredRow): Declared => ({
  layers: release.declared_layers,
  thicknessMm: release.declared_thickness_mm,
  copperUm: release.declared_copper_um,
  finish: release.declared_finish,
  mask: release.declared_mask,
  legend: release.declared_legend,
  stencil: release.declared_stencil
})
