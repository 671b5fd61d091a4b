import pg from 'pg'
import { storageSettingsSchema } from '../config'
import { openConfiguredStorage } from '../services/storage'
import { checkStorage } from './storage-check'

// Holds the stored files against the rows that name them. Exit code 1 when something was found.

const onlySizes = process.argv.includes('--sizes')

async function check(): Promise<void> {
  const storage = openConfiguredStorage(storageSettingsSchema.parse(process.env))
  const client = new pg.Client({ connectionString: process.env.DATABASE_URL! })
  await client.connect()
  try {
    const { checked, findings } = await checkStorage(client, storage, { onlySizes })
    for (const { key, finding, quarantine } of findings) process.stdout.write(`${finding}\t${key}${quarantine ? `\tnow ${quarantine}` : ''}\n`)
    const counts = ['missing', 'damaged', 'unrecorded'].map(kind => `${findings.filter(f => f.finding === kind).length} ${kind}`)
    process.stdout.write(`${checked} files checked by ${onlySizes ? 'size' : 'SHA-256'}: ${counts.join(', ')}.\n`)
    if (findings.some(f => f.finding !== 'unrecorded')) process.stdout.write('What is missing or damaged can be copied back from a backup under the same key; its record is untouched.\n')
    if (findings.some(f => f.quarantine)) process.stdout.write('What lies below quarantine/ is not used any more and not deleted: look at it, then remove it by hand.\n')
    if (findings.length) process.exitCode = 1
  }
  finally {
    await client.end()
    storage.close()
  }
}

check().catch((error: Error) => {
  process.stderr.write(`${error.message}\n`)
  process.exitCode = 1
})
