// npm run migrate: brings the database of the data folder to the newest schema.
import { config } from '@/lib/platform/config/config'
import { openDatabase } from './connection'
import { migrateToLatest } from './migrator'

const db = openDatabase(config().databasePath)
const applied = await migrateToLatest(db)
console.log(applied.length ? `Applied ${applied.join(', ')}.` : 'The database is up to date.')
await db.destroy()
