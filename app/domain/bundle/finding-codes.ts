/** How much a finding matters: a `stop` keeps a release from being published, a `caution` takes a written answer. */
export type Severity = 'stop' | 'caution' | 'note'

/** Every code of the bundle check with its severity. The spelling is a contract: codes are stored and read by machines. */
export const findingCodes = {
  'zip-unreadable': 'stop',
  'zip-encrypted': 'stop',
  'zip-path-unsafe': 'stop',
  'zip-link': 'stop',
  'zip-method': 'stop',
  'zip-too-large': 'stop',
  'zip-name-clash': 'stop',
  'zip-name-odd': 'caution',
  'zip-nested': 'caution',
  'zip-backslash': 'note',
  'zip-extra-data': 'note',

  'copper-missing': 'stop',
  'mask-missing': 'stop',
  'outline-missing': 'stop',
  'outline-open': 'stop',
  'layer-clash': 'stop',
  'layer-gap': 'stop',
  'layer-count': 'stop',
  'layer-empty': 'stop',
  'layer-truncated': 'stop',
  'layer-unreadable': 'stop',
  'layer-too-complex': 'stop',
  'layer-misaligned': 'stop',
  'layer-conflict': 'caution',
  'layer-unknown': 'caution',
  'copper-past-outline': 'caution',
  'paste-missing': 'caution',
  'legend-missing': 'caution',
  'deprecated-syntax': 'note',
  'text-unsafe': 'note',

  'drill-missing': 'stop',
  'drill-unreadable': 'stop',
  'drill-units': 'stop',
  'drill-misaligned': 'stop',
  'drill-too-complex': 'stop',
  'drill-format-assumed': 'caution',
  'hole-on-outline': 'note',

  'bom-missing': 'stop',
  'bom-unreadable': 'stop',
  'bom-quantity': 'stop',
  'bom-designator-repeated': 'stop',
  'bom-not-placed': 'caution',
  'bom-cell-unsafe': 'caution',

  'placement-missing': 'stop',
  'placement-unreadable': 'stop',
  'placement-designator-repeated': 'stop',
  'placement-not-in-bom': 'stop',
  'placement-outside': 'stop',
  'placement-units': 'stop',
  'placement-mirrored': 'caution',

  'revision-unchanged': 'stop',
  'thickness-conflict': 'stop',
  'thickness-missing': 'caution',
  'source-missing': 'caution',
  'licence-missing': 'caution',

  'check-cut-off': 'stop'
} as const satisfies Record<string, Severity>

export type FindingCode = keyof typeof findingCodes
