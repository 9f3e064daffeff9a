/** `npm run check`: types, lint, format, arrows, unused code. */
import { checkAll } from './check-all.ts';

const results = await checkAll();
const failed = results.filter((result) => !result.isClean).map((result) => result.name);
console.log(failed.length ? `\nNot clean: ${failed.join(', ')}` : '\nAll clean.');
process.exit(failed.length ? 1 : 0);
