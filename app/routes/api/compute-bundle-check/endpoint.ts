import { rm } from 'node:fs/promises'
import type { Route } from './+types/endpoint'
import { callerOf, countUse } from '~/domain/accounts/rate-limit.server'
import { publicAnswer, type DeclaredDetails } from '~/domain/bundle/bundle-check.types'
import { readDeclaredDetails } from '~/domain/bundle/declared-details'
import { runBundleCheck } from '~/domain/bundle/run-bundle-check.server'
import { DomainError } from '~/lib/domain-error'
import { InFlight } from '~/lib/in-flight'
import { answerApi } from '~/server/answer.server'
import { requestInfoContext } from '~/server/context'
import { log } from '~/server/log.server'
import { discardBody, receiveBody } from '~/server/receive-file.server'
import { services } from '~/server/services.server'

const perMinute = { kind: 'compute', limit: 60, windowMs: 60_000 }
/** A check takes seconds and its zip lies on our disk meanwhile; releases wait in the same queue. */
const inFlight = new InFlight(2, 16)

/** Checks anybody's bundle; nothing is stored. */
export async function action({ request, url, context }: Route.ActionArgs) {
  try {
    return await answerApi(async () => {
      if (request.method !== 'POST') return notAllowed()
      const caller = callerOf(context.get(requestInfoContext).ip)
      await countUse(services(), perMinute, caller)
      const declared = readDeclaredDetails(url.searchParams)
      if (!declared.ok) throw new DomainError('invalid', 'The query of this address is not valid.', declared.errors)
      return inFlight.run(caller, () => check(request, declared.value))
    })
  } finally {
    discardBody(request)
  }
}

async function check(request: Request, declared: DeclaredDetails) {
  const { config } = services()
  const file = await receiveBody(request, 'application/zip', config.uploadDir, config.uploadMaxBytes)
  try {
    const onCrash = (detail: string) => log('warn', 'bundle-check-crashed', { detail })
    const answer = await runBundleCheck({ ...declared, path: file.path, signal: request.signal, onCrash })
    return Response.json(publicAnswer(answer), { headers: { 'Cache-Control': 'no-store' } })
  } finally {
    await rm(file.path, { force: true })
  }
}

export const loader = () => notAllowed()

const notAllowed = () =>
  Response.json(
    { type: 'about:blank', title: 'Method not allowed', status: 405, detail: 'Send the zip with POST.', errors: [] },
    { status: 405, headers: { Allow: 'POST', 'Content-Type': 'application/problem+json' } }
  )
