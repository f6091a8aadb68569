import type { Tx } from '~db/client.server'
import { coarseGrain, coarseLife } from './count-life'
import type { CountsDelta, GroupDelta } from './counts-delta'
import * as repo from './counts-writing.repo.server'
import { blockOf, decodeBlock, encodeBlock, slotOf, type DayBlock } from './day-block'
import { addLife, totalKeys, type DayCounts, type GroupTotals, type LifeCounts } from './group-counts'

/**
 * Adds a delta to stored counts; what comes to nothing is deleted.
 * @throws WrongCounts when anything would be counted less than never: part of the delta is then written, and the counts must not be read
 */
export async function applyCounts(tx: Tx, tables: repo.CountTables, boardId: string, delta: CountsDelta): Promise<void> {
  for (const group of delta.values()) await applyGroup(tx, tables, boardId, group)
}

async function applyGroup(tx: Tx, tables: repo.CountTables, boardId: string, group: GroupDelta): Promise<void> {
  const { days, totals, lives } = group.counts
  if (totalKeys.every((key) => totals[key] === 0) && lives!.size === 0) return
  const known = await repo.findGroup(tx, tables, group)
  const json = summedTotals(known?.totals_json ?? '{}', totals)
  const id = known?.id ?? (await repo.insertGroup(tx, tables, boardId, group, json))
  await applyDays(tx, tables, id, days)
  await applyLives(tx, tables, id, 1, lives!)
  await applyLives(tx, tables, id, coarseGrain, coarseLives(lives!))
  if (json === '{}') await repo.deleteGroup(tx, tables, id)
  else if (known !== undefined && known.totals_json !== json) await repo.updateTotals(tx, tables, id, json)
}

/** The totals with others added, without those that come to 0, in the order of `totalKeys`: the same totals give the same text. */
function summedTotals(json: string, more: GroupTotals): string {
  const stored = JSON.parse(json) as Partial<GroupTotals>
  const sums: Partial<GroupTotals> = {}
  for (const key of totalKeys) {
    const sum = (stored[key] ?? 0) + more[key]
    // The sum of the days on which watching began is below 0 where it began before 1970.
    if (sum < 0 && key !== 'watchBegan') throw belowZero(key)
    if (sum !== 0) sums[key] = sum
  }
  return JSON.stringify(sums)
}

async function applyDays(tx: Tx, tables: repo.CountTables, groupId: number, days: DayCounts): Promise<void> {
  const blocks = new Map<number, DayBlock>()
  for (const [counter, byDay] of days)
    for (const [day, count] of byDay) {
      const block = blocks.get(blockOf(day)) ?? new Map<number, number>()
      blocks.set(blockOf(day), block.set(slotOf(counter, day), count))
    }
  for (const [number, more] of blocks) {
    const bytes = await repo.findBlock(tx, tables, groupId, number)
    const block = bytes === undefined ? new Map<number, number>() : decodeBlock(bytes)
    for (const [slot, count] of more) {
      const sum = (block.get(slot) ?? 0) + count
      if (sum < 0) throw belowZero('a day')
      if (sum === 0) block.delete(slot)
      else block.set(slot, sum)
    }
    if (block.size === 0) await repo.deleteBlock(tx, tables, groupId, number)
    else await repo.putBlock(tx, tables, groupId, number, encodeBlock(block))
  }
}

function coarseLives(lives: LifeCounts): LifeCounts {
  const coarse: LifeCounts = new Map()
  for (const life of lives.values()) {
    const rounded = coarseLife(life)
    if (rounded !== null) addLife(coarse, rounded)
  }
  return coarse
}

async function applyLives(tx: Tx, tables: repo.CountTables, groupId: number, grain: 1 | 14, lives: LifeCounts): Promise<void> {
  const more = [...lives.values()].filter((life) => life.count > 0)
  if (more.length > 0) await repo.addLives(tx, tables, groupId, grain, more)
  for (const life of lives.values()) {
    if (life.count > 0) continue
    const left = (await repo.countLives(tx, tables, groupId, grain, life)) + life.count
    if (left < 0) throw belowZero('an observation')
    if (left === 0) await repo.deleteLives(tx, tables, groupId, grain, life)
    else await repo.setLives(tx, tables, groupId, grain, life, left)
  }
}

/** The stored counts were wrong before. */
export class WrongCounts extends Error {}

const belowZero = (what: string) =>
  new WrongCounts(
    `The stored counts of ${what} would fall below 0: they do not agree with the reports. \`fettle recount\` mends them.`
  )
