type Claimed = { claim: 'fits' | 'fits-with-care' | 'does-not-fit' | 'untested'; reports: number; name: string }

const order = ['fits', 'fits-with-care', 'untested', 'does-not-fit']

/** Boards in the order in which to consider them: by the claim, then by how many reports stand behind it, then by name. */
export const byFit = (a: Claimed, b: Claimed): number =>
  order.indexOf(a.claim) - order.indexOf(b.claim) || b.reports - a.reports || (a.name < b.name ? -1 : a.name > b.name ? 1 : 0)
