import { data, redirect } from 'react-router'
import type { Route } from './+types/page'
import { Actions, Button, ButtonLink } from '~/components/button'
import { SiteSheet } from '~/components/site-sheet'
import { Title } from '~/components/title'
import { finishGithubSignIn, signInProblemContext } from '~/server/github-callback.server'

export const middleware: Route.MiddlewareFunction[] = [finishGithubSignIn]

export const meta: Route.MetaFunction = () => [{ title: 'Not signed in · Fettle' }]

export function loader({ context }: Route.LoaderArgs) {
  const problem = context.get(signInProblemContext)
  if (problem === null) throw redirect('/sign-in')
  return data(problem, { status: problem.status })
}

export default function NotSignedIn({ loaderData }: Route.ComponentProps) {
  return (
    <SiteSheet trail={[{ label: 'Boards', href: '/' }, { label: 'Sign in', href: '/sign-in' }, { label: 'GitHub' }]} isForm>
      <Title heading={loaderData.heading} lead={loaderData.message}>
        <form method="post" action="/sign-in/github" className="mt-6">
          <Actions>
            <Button>Try GitHub again</Button>
            <ButtonLink kind="outline" href="/sign-in">
              Other ways to sign in
            </ButtonLink>
          </Actions>
        </form>
      </Title>
    </SiteSheet>
  )
}
