import { User } from '#db/models/index.ts';
import type { UnitSystem } from '#lib/plan/types.ts';
import type { SignedInUser } from './actor.ts';

/** Changes the name that later copies and receipts carry, and the units that pages start in. */
export async function updateProfile(options: {
  actor: SignedInUser;
  name: string;
  units: UnitSystem;
}): Promise<void> {
  const { actor, name, units } = options;
  await User.update(
    { name, units, updatedAt: new Date() },
    { where: { id: actor.id }, fields: ['name', 'units', 'updatedAt'] },
  );
}
