/** Whether a read of the database comes back. */
export { answers as isDatabaseAnswering } from '~db/client.server'
