import { createHmac } from 'node:crypto'
import { isIPv6 } from 'node:net'
import type { Db } from '~db/client.server'
import { DomainError } from '~/lib/domain-error'
import * as counts from './rate-counts.repo.server'

/** At most `limit` uses of what `kind` names, for one address or person, in each window. */
export type RateLimit = { kind: string; limit: number; windowMs: number }

/** The longest window there may be; older counts are swept. */
export const maxRateWindowMs = 24 * 3_600_000

type Keeper = { db: Db; config: { appSecret: string }; now: () => Date }

/**
 * Counts one use and refuses the one too many. What is counted (an address, an IP) is stored only as a keyed hash.
 * @param subject whose uses are counted together
 * @throws DomainError `rate-limited`, saying when to come back
 */
export async function countUse({ db, config, now }: Keeper, rate: RateLimit, subject: string): Promise<void> {
  const nowMs = now().getTime()
  const windowStart = nowMs - (nowMs % rate.windowMs)
  const bucket = createHmac('sha256', config.appSecret).update(`rate\n${rate.kind}\n${subject}`).digest('base64url')
  const used = await counts.add(db, bucket, windowStart)
  if (used <= rate.limit) return
  const minutes = Math.max(1, Math.ceil((windowStart + rate.windowMs - nowMs) / 60_000))
  throw new DomainError('rate-limited', `Too many attempts. Try again in ${minutes} ${minutes === 1 ? 'minute' : 'minutes'}.`)
}

/** What counts as one caller: an IPv4 address, or the /64 network of an IPv6 one, which a single household holds whole. */
export function callerOf(ip: string): string {
  const mapped = /^::ffff:(\d+\.\d+\.\d+\.\d+)$/i.exec(ip)
  if (mapped) return mapped[1]!
  if (!isIPv6(ip)) return ip
  const [head = '', tail] = ip.split('%')[0]!.toLowerCase().split('::')
  const front = head === '' ? [] : head.split(':')
  const back = tail === undefined || tail === '' ? [] : tail.split(':')
  const groups =
    tail === undefined ? front : [...front, ...Array<string>(Math.max(0, 8 - front.length - back.length)).fill('0'), ...back]
  return `${groups
    .slice(0, 4)
    .map((group) => group.replace(/^0+(?=.)/, ''))
    .join(':')}::/64`
}
