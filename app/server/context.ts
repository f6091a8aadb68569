import { createContext } from 'react-router'
import { visitor, type Actor } from '~/domain/accounts/can'

/** What Express knows about a request before the router sees it. */
export type RequestInfo = { id: string; nonce: string; ip: string }

/** Defaults stand in where root middleware does not run (no route matched). */
export const requestInfoContext = createContext<RequestInfo>({ id: '', nonce: '', ip: '' })
export const actorContext = createContext<Actor>(visitor)
/** The session that the request belongs to, for the account page; null for a visitor. */
export const sessionContext = createContext<{ idHash: string } | null>(null)
