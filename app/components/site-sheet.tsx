import { useRouteLoaderData } from 'react-router'
import { Sheet, type SheetProps } from './sheet'

/** What the root loader tells every page about who looks at it. */
export type SiteFrame = { displayName: string | null; isDemo: boolean; mailFakeUrl: string | null }

/** The frame of every page of the site: `Sheet` with the account entry of whoever is signed in. */
export function SiteSheet(props: Omit<SheetProps, 'account' | 'isDemo'>) {
  const frame = useRouteLoaderData<SiteFrame>('root')
  const account = frame?.displayName ? { label: frame.displayName, href: '/account' } : { label: 'Sign in', href: '/sign-in' }
  return <Sheet {...props} account={account} isDemo={frame?.isDemo} />
}
