import { useEffect, useRef, type ReactNode } from 'react'
import { isRouteErrorResponse, Links, Meta, Outlet, Scripts, ScrollRestoration, useLocation } from 'react-router'
import type { Route } from './+types/root'
import stylesheet from './app.css?url'
import { PageError } from '~/components/page-error'
import { SiteSheet, type SiteFrame } from '~/components/site-sheet'
import { actorContext } from '~/server/context'
import { loadActor } from '~/server/session.server'
import { services } from '~/server/services.server'

export const links: Route.LinksFunction = () => [
  { rel: 'stylesheet', href: stylesheet },
  { rel: 'icon', href: '/icon.svg', type: 'image/svg+xml' }
]

export const middleware: Route.MiddlewareFunction[] = [loadActor]

export function loader({ context }: Route.LoaderArgs): SiteFrame {
  const { config } = services()
  const isDemo = config.mode === 'demo'
  return { displayName: context.get(actorContext).displayName, isDemo, mailFakeUrl: isDemo ? config.mail.fakeUrl : null }
}

export function Layout({ children }: { children: ReactNode }) {
  return (
    <html lang="en">
      <head>
        <meta charSet="utf-8" />
        <meta name="viewport" content="width=device-width,initial-scale=1" />
        <Meta />
        <Links />
      </head>
      <body>
        {children}
        <ScrollRestoration />
        <Scripts />
      </body>
    </html>
  )
}

export default function Root() {
  useHeadingFocus()
  return <Outlet />
}

/**
 * After a step to another page without a page load, the focus goes where a page load would leave it: to the top, so that the new heading
 * is read. A summary of errors or a line that says what was done goes first; an address with a place in it has named its own.
 */
function useHeadingFocus() {
  const { pathname, search, hash } = useLocation()
  const at = pathname + search
  const before = useRef(at)
  useEffect(() => {
    if (before.current === at) return
    before.current = at
    if (hash !== '' || document.activeElement?.closest('.sumerr, .done')) return
    const heading = document.querySelector('h1')
    heading?.setAttribute('tabindex', '-1')
    heading?.focus({ preventScroll: true })
  }, [at, hash])
}

export function ErrorBoundary({ error }: Route.ErrorBoundaryProps) {
  const status = isRouteErrorResponse(error) ? error.status : 500
  const message = isRouteErrorResponse(error) ? (error.data as { message?: string } | null)?.message : undefined
  return (
    <SiteSheet trail={[{ label: 'Boards', href: '/' }, { label: `Answer ${status}` }]}>
      <title>{`${status} · Fettle`}</title>
      <PageError status={status} message={message} />
    </SiteSheet>
  )
}
