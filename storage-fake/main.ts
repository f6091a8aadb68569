import { demoDefaults } from './defaults'
import { startStorageFake } from './server'

function readPort(text: string | undefined): number {
  if (text === undefined || text === '') return demoDefaults.port
  if (!/^\d{1,5}$/.test(text) || Number(text) > 65_535) throw new Error(`STORAGE_FAKE_PORT must be a port number, not "${text}"`)
  return Number(text)
}

async function main(env: NodeJS.ProcessEnv): Promise<void> {
  const host = env.STORAGE_FAKE_HOST || demoDefaults.host
  const secretAccessKey = env.STORAGE_FAKE_SECRET_ACCESS_KEY || demoDefaults.secretAccessKey
  if (secretAccessKey === demoDefaults.secretAccessKey && !['127.0.0.1', '::1', 'localhost'].includes(host)) {
    throw new Error('STORAGE_FAKE_HOST reaches beyond this machine: set STORAGE_FAKE_SECRET_ACCESS_KEY to a secret of your own')
  }
  const options = {
    dir: env.STORAGE_FAKE_DIR || demoDefaults.dir,
    host,
    port: readPort(env.STORAGE_FAKE_PORT),
    region: env.STORAGE_FAKE_REGION || demoDefaults.region,
    bucket: env.STORAGE_FAKE_BUCKET || demoDefaults.bucket,
    accessKeyId: env.STORAGE_FAKE_ACCESS_KEY_ID || demoDefaults.accessKeyId,
    secretAccessKey
  }
  const fake = await startStorageFake(options)
  const { region, bucket, accessKeyId } = options
  console.log(JSON.stringify({ listening: fake.url, region, bucket, accessKeyId }))
  for (const signal of ['SIGTERM', 'SIGINT'] as const) process.once(signal, () => void fake.close().then(() => process.exit(0)))
}

main(process.env).catch((error: unknown) => {
  console.error(`storage-fake: ${error instanceof Error ? error.message : String(error)}`)
  process.exitCode = 1
})
