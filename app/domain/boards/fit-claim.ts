/** What a maintainer may say of a board on one console revision. */
export const fitClaims = ['fits', 'fits-with-care', 'does-not-fit', 'untested'] as const
