/** For which sides a solder paste stencil is to be ordered. */
export const stencils = ['none', 'top', 'bottom', 'both'] as const
