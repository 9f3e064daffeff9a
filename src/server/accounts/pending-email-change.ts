import { Verification } from '#db/models/index.ts';

/** Under which name a move to another address waits for its confirmation: one for each person. */
export function nameEmailChange(userId: string): string {
  return `change-email:${userId}`;
}

/** Calls off a move to another address that waits for its confirmation. */
export async function forgetEmailChange(userId: string): Promise<void> {
  await Verification.destroy({ where: { identifier: nameEmailChange(userId) } });
}
