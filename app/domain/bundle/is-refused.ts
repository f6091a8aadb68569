import type { BundleCheck } from './bundle-check.types'

/**
 * Whether the check refused the zip itself: it was not opened, or reading it had to be cut off. Such a file is never stored; only what was
 * found is.
 */
export const isRefused = ({ findings }: Pick<BundleCheck, 'findings'>): boolean =>
  findings.some(({ code, severity }) => severity === 'stop' && (code.startsWith('zip-') || code === 'check-cut-off'))
