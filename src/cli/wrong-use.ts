/** The arguments cannot be understood: told on stderr, exit code 2. */
export class WrongUse extends Error {}

/** Runs a command and turns wrong use into its exit code; everything else goes on up. */
export function guardUse(usage: string, run: () => number): number {
  try {
    return run();
  } catch (fault) {
    const isParseFault =
      fault instanceof TypeError && 'code' in fault && String(fault.code).startsWith('ERR_PARSE_ARGS');
    if (!(fault instanceof WrongUse) && !isParseFault) throw fault;
    process.stderr.write(`${fault.message}\nusage: ${usage}\n`);
    return 2;
  }
}
