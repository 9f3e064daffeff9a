/** The object store as a process of its own: `tsx serve.ts --port N --folder DIR`, keys and region from S3_* in the environment. */
import { parseArgs } from 'node:util';
import { startObjectStore } from './start-object-store.ts';

const { values } = parseArgs({
  options: {
    port: { type: 'string', default: '4402' },
    folder: { type: 'string', default: '.data/objects' },
  },
});
const store = await startObjectStore({
  port: Number(values.port),
  folder: values.folder,
  region: process.env['S3_REGION'] ?? 'eu-central-1',
  accessKeyId: process.env['S3_ACCESS_KEY_ID'] ?? 'local',
  secretAccessKey: process.env['S3_SECRET_ACCESS_KEY'] ?? 'local-secret',
});
console.log(`Object store on ${store.url}`);
process.once('SIGTERM', () => void store.close().then(() => process.exit(0)));
process.once('SIGINT', () => void store.close().then(() => process.exit(0)));
