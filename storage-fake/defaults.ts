/**
 * What the demo's object storage takes when nothing else is set. It runs as a process of its own (`npx tsx storage-fake/main.ts`), prints
 * one line of JSON with its address when it listens, and stops on SIGTERM or SIGINT.
 *
 * | variable | default | |
 * | --- | --- | --- |
 * | STORAGE_FAKE_DIR | data/storage | folder for the objects |
 * | STORAGE_FAKE_HOST | 127.0.0.1 | address to listen on |
 * | STORAGE_FAKE_PORT | 0 | 0 takes any free port |
 * | STORAGE_FAKE_REGION | us-east-1 | |
 * | STORAGE_FAKE_BUCKET | fettle | made at start |
 * | STORAGE_FAKE_ACCESS_KEY_ID | fettle-demo | |
 * | STORAGE_FAKE_SECRET_ACCESS_KEY | fettle-demo-secret | public, hence refused beyond loopback |
 */
export const demoDefaults = {
  dir: 'data/storage',
  host: '127.0.0.1',
  port: 0,
  region: 'us-east-1',
  bucket: 'fettle',
  accessKeyId: 'fettle-demo',
  secretAccessKey: 'fettle-demo-secret'
}
