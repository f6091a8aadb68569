import { Resvg } from '@resvg/resvg-js'

/* Loaded before a child process: its renderer then ends the process, as native code does that aborts. */
Resvg.prototype.render = () => process.abort()
