import pino from 'pino'
import { config } from './config/config'

/** Structured lines on standard output. Secrets never go in: log ids and causes, not bodies, tokens or addresses of mail. */
export const log = pino({ level: config().logLevel, base: null, timestamp: pino.stdTimeFunctions.isoTime })
