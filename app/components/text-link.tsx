import type { ComponentProps } from 'react'
import { Link, useInRouterContext } from 'react-router'

export type TextLinkProps = Omit<ComponentProps<'a'>, 'href' | 'style'> & {
  href: string
  /** Load as a document: files, feeds, the API. */
  document?: boolean
}

/** A link that moves inside the application where it can, and is a plain one everywhere else. */
export function TextLink({ href, document, ...rest }: TextLinkProps) {
  const inRouter = useInRouterContext()
  const isInternal = href.startsWith('/') && !href.startsWith('//')
  if (!inRouter || !isInternal || document || rest.download !== undefined) return <a href={href} {...rest} />
  return <Link to={href} {...rest} />
}
