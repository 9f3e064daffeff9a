/** The mail sink as a process of its own: `tsx serve.ts --smtp N --page N --file F`. */
import { parseArgs } from 'node:util';
import { startMailSink } from './start-mail-sink.ts';

const { values } = parseArgs({
  options: {
    smtp: { type: 'string', default: '4404' },
    page: { type: 'string', default: '4405' },
    file: { type: 'string' },
  },
});
const sink = await startMailSink({
  smtpPort: Number(values.smtp),
  pagePort: Number(values.page),
  ...(values.file ? { file: values.file } : {}),
});
console.log(`Mail sink on ${sink.smtpUrl}, to be read on ${sink.pageUrl}`);
process.once('SIGTERM', () => void sink.close().then(() => process.exit(0)));
process.once('SIGINT', () => void sink.close().then(() => process.exit(0)));
