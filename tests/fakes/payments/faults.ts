import type { CallFault } from './tables.ts';
import type { World } from './world.ts';

function isMet(fault: CallFault, method: string, path: string): boolean {
  if (fault.method !== '*' && fault.method !== method) return false;
  const wanted = fault.path.split('/');
  const given = path.split('/');
  return (
    wanted.length === given.length && wanted.every((part, index) => part === '*' || part === given[index])
  );
}

/** The fault that a call was told to meet; each meeting uses it up once. */
export function takeFault(world: World, method: string, path: string): CallFault | null {
  const fault = world.store.all('call_fault').find((row) => isMet(row, method, path));
  if (!fault) return null;
  if (fault.times <= 1) world.store.remove('call_fault', fault.id);
  else world.store.put('call_fault', fault.id, { ...fault, times: fault.times - 1 });
  return fault;
}
