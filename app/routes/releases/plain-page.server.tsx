import type { ReactNode } from 'react'
import { renderToStaticMarkup } from 'react-dom/server'
import stylesheet from '~/app.css?url'
import { Actions, ButtonLink } from '~/components/button'
import { Sheet } from '~/components/sheet'
import { Title } from '~/components/title'

export type PlainPage = { status: number; heading: string; lead: ReactNode; way: { label: string; href: string } }

/** A page without scripts for an endpoint that has none of its own: what went wrong with a file, and the way on. */
export function plainPage({ status, heading, lead, way }: PlainPage): Response {
  const html = renderToStaticMarkup(
    <html lang="en">
      <head>
        <meta charSet="utf-8" />
        <meta name="viewport" content="width=device-width,initial-scale=1" />
        <title>{`${heading} · Fettle`}</title>
        <link rel="stylesheet" href={stylesheet} />
        <link rel="icon" href="/icon.svg" type="image/svg+xml" />
      </head>
      <body>
        <Sheet trail={[{ label: 'Boards', href: '/' }, { label: heading }]} account={{ label: 'Account', href: '/account' }}>
          <Title heading={heading} lead={lead}>
            <div className="mt-6">
              <Actions>
                <ButtonLink href={way.href}>{way.label}</ButtonLink>
              </Actions>
            </div>
          </Title>
        </Sheet>
      </body>
    </html>
  )
  return new Response(`<!doctype html>${html}`, {
    status,
    headers: { 'Content-Type': 'text/html; charset=utf-8', 'Cache-Control': 'private, no-store' }
  })
}
