import { AsyncLocalStorage } from 'node:async_hooks'
import BetterSqlite from 'better-sqlite3'
import type { CompiledQuery, DatabaseConnection, DatabaseIntrospector, Dialect, Driver, QueryResult } from 'kysely'
import { Kysely, SelectQueryNode, SqliteAdapter, SqliteIntrospector, SqliteQueryCompiler } from 'kysely'

/**
 * A dialect of our own over better-sqlite3. Against Kysely's: reads go to a read-only connection without any mutex, writes to one writer
 * connection behind a first-in-first-out queue, transactions begin IMMEDIATE (a deferred one fails at once with BUSY_SNAPSHOT when it reads
 * before it writes), statements are prepared once, and `db` used inside `db.transaction()` is an error instead of waiting for ever.
 */

type Scope = { isOpen: boolean }
const scope = new AsyncLocalStorage<Scope>()
const insideTransaction = () => scope.getStore()?.isOpen === true

const maxStatements = 500

class Prepared {
  readonly #statements = new Map<string, BetterSqlite.Statement>()
  constructor(readonly sqlite: BetterSqlite.Database) {}

  statement(sql: string): BetterSqlite.Statement {
    let found = this.#statements.get(sql)
    if (found) return found
    if (this.#statements.size >= maxStatements) this.#statements.delete(this.#statements.keys().next().value as string)
    found = this.sqlite.prepare(sql)
    this.#statements.set(sql, found)
    return found
  }

  run<R>(query: CompiledQuery): QueryResult<R> {
    const statement = this.statement(query.sql)
    if (statement.reader) return { rows: statement.all(query.parameters) as R[] }
    const { changes, lastInsertRowid } = statement.run(query.parameters)
    return { rows: [], numAffectedRows: BigInt(changes), insertId: BigInt(lastInsertRowid) }
  }
}

/** First in, first out: `lock()` resolves with the function that releases. */
class Queue {
  #last: Promise<void> = Promise.resolve()
  async lock(): Promise<() => void> {
    const before = this.#last
    let release!: () => void
    this.#last = new Promise<void>((resolve) => (release = resolve))
    await before
    return release
  }
}

type Parts = { reader: Prepared; writer: Prepared; queue: Queue; openReader: () => BetterSqlite.Database; begin: string }

class Connection implements DatabaseConnection {
  #release: (() => void) | null = null
  constructor(readonly parts: Parts) {}

  async begin() {
    this.#release = await this.parts.queue.lock()
    try {
      this.parts.writer.sqlite.exec(this.parts.begin)
    } catch (error) {
      this.#end()
      throw error
    }
  }

  /** A `commit` that fails leaves the transaction open for the rollback that Kysely sends next. */
  finish(command: 'commit' | 'rollback') {
    if (this.#release === null) return
    const { sqlite } = this.parts.writer
    if (command === 'commit' || sqlite.inTransaction) sqlite.exec(command)
    this.#end()
  }

  #end() {
    this.#release?.()
    this.#release = null
  }

  async executeQuery<R>(query: CompiledQuery): Promise<QueryResult<R>> {
    const { reader, writer, queue } = this.parts
    if (this.#release !== null) return writer.run<R>(query)
    if (insideTransaction())
      throw new Error('`db` was used inside db.transaction(): use the transaction that the callback was given')
    if (SelectQueryNode.is(query.query)) return reader.run<R>(query)
    if (query.query.kind === 'RawNode' && reader.statement(query.sql).readonly) return reader.run<R>(query)
    const release = await queue.lock()
    try {
      return writer.run<R>(query)
    } finally {
      release()
    }
  }

  /** Rows as they come, on a connection of its own: an open iterator would keep the shared one busy. */
  async *streamQuery<R>(query: CompiledQuery): AsyncIterableIterator<QueryResult<R>> {
    if (this.#release !== null || insideTransaction()) throw new Error('Streaming inside a transaction is not supported')
    const sqlite = this.parts.openReader()
    try {
      for (const row of sqlite.prepare(query.sql).iterate(query.parameters)) yield { rows: [row as R] }
    } finally {
      sqlite.close()
    }
  }
}

class SqliteDriver implements Driver {
  #parts: Parts | null = null
  constructor(
    readonly file: string,
    readonly isReadOnly: boolean
  ) {}

  async init() {
    const openReader = () => openReadOnly(this.file)
    const writer = this.isReadOnly ? openReader() : openWriter(this.file)
    const begin = this.isReadOnly ? 'begin' : 'begin immediate'
    this.#parts = { writer: new Prepared(writer), reader: new Prepared(openReader()), queue: new Queue(), openReader, begin }
  }
  async acquireConnection() {
    return new Connection(this.#parts!)
  }
  async beginTransaction(connection: DatabaseConnection) {
    await (connection as Connection).begin()
  }
  async commitTransaction(connection: DatabaseConnection) {
    ;(connection as Connection).finish('commit')
  }
  async rollbackTransaction(connection: DatabaseConnection) {
    ;(connection as Connection).finish('rollback')
  }
  async releaseConnection() {}
  async destroy() {
    const release = await this.#parts?.queue.lock()
    this.#parts?.reader.sqlite.close()
    this.#parts?.writer.sqlite.close()
    release?.()
  }
}

/** In WAL better-sqlite3 quietly uses synchronous=NORMAL, which costs acknowledged commits in a power cut; hence FULL. */
function openWriter(file: string): BetterSqlite.Database {
  const sqlite = new BetterSqlite(file, { timeout: 5000 })
  sqlite.pragma('journal_mode = WAL')
  sqlite.pragma('synchronous = FULL')
  common(sqlite)
  sqlite.pragma('journal_size_limit = 67108864')
  return sqlite
}

/** A read-only connection to a database file that exists. */
export function openReadOnly(file: string): BetterSqlite.Database {
  const sqlite = new BetterSqlite(file, { readonly: true, fileMustExist: true, timeout: 5000 })
  common(sqlite)
  return sqlite
}

function common(sqlite: BetterSqlite.Database) {
  sqlite.pragma('foreign_keys = ON')
  sqlite.pragma('busy_timeout = 5000')
  sqlite.pragma('trusted_schema = OFF')
}

class TransactionalAdapter extends SqliteAdapter {
  override get supportsTransactionalDdl() {
    return true
  }
}

class SqliteFileDialect implements Dialect {
  constructor(
    readonly file: string,
    readonly isReadOnly: boolean
  ) {}
  createDriver(): Driver {
    return new SqliteDriver(this.file, this.isReadOnly)
  }
  createQueryCompiler() {
    return new SqliteQueryCompiler()
  }
  createAdapter() {
    return new TransactionalAdapter()
  }
  createIntrospector(db: Kysely<unknown>): DatabaseIntrospector {
    return new SqliteIntrospector(db)
  }
}

/** Kysely over one SQLite file; marks the time inside a transaction so that the dialect can refuse `db` there. */
export class SqliteKysely<T> extends Kysely<T> {
  /** @param isReadOnly for a reader in another thread; a transaction is then a snapshot for several reads */
  constructor(file: string, { isReadOnly = false } = {}) {
    super({ dialect: new SqliteFileDialect(file, isReadOnly) })
  }

  override transaction() {
    const builder = super.transaction()
    const execute = builder.execute.bind(builder)
    builder.execute = async (callback) => {
      if (insideTransaction()) throw new Error('db.transaction() inside a transaction: pass the open one on')
      const here: Scope = { isOpen: true }
      try {
        return await scope.run(here, () => execute(callback))
      } finally {
        here.isOpen = false
      }
    }
    return builder
  }

  override startTransaction(): never {
    throw new Error('startTransaction() is not supported: use transaction().execute()')
  }
}
