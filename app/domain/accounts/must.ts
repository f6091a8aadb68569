import { DomainError } from '~/lib/domain-error'
import { can, type Action, type Actor, type Subjects } from './can'

/**
 * Stops a use case that the actor may not do.
 * @throws DomainError `unauthenticated` for a visitor, `forbidden` for a member
 */
export function must<A extends Action>(actor: Actor, action: A, subject: Subjects[A]): void {
  if (can(actor, action, subject)) return
  if (actor.userId === null) throw new DomainError('unauthenticated', 'Sign in to do this.')
  throw new DomainError('forbidden', 'Your account may not do this.')
}
