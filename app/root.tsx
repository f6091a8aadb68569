import type { ReactNode } from 'react'
import { isRouteErrorResponse, Links, Meta, Outlet, Scripts, ScrollRestoration } from 'react-router'
import type { Route } from './+types/root'
import stylesheet from './app.css?url'
import { SiteSheet, type SiteFrame } from '~/components/site-sheet'
import { Title } from '~/components/title'
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
  return <Outlet />
}

const headings: Record<number, string> = {
  400: 'This address does not add up',
  403: 'Not for this account',
  404: 'There is no such sheet',
  429: 'Too many requests'
}

export function ErrorBoundary({ error }: Route.ErrorBoundaryProps) {
  const status = isRouteErrorResponse(error) ? error.status : 500
  const message = isRouteErrorResponse(error) ? (error.data as { message?: string } | null)?.message : undefined
  const heading = headings[status] ?? (status >= 500 ? 'Something went wrong here' : 'That did not work')
  const lead =
    message ??
    (status >= 500
      ? 'It is noted in our log. Nothing you entered was changed; try again in a minute.'
      : 'Look at the address, or start from the boards.')
  return (
    <SiteSheet trail={[{ label: 'Boards', href: '/' }, { label: `Error ${status}` }]}>
      <title>{`${heading} · Fettle`}</title>
      <Title heading={heading} lead={lead} />
    </SiteSheet>
  )
}
