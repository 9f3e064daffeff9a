import { createHash, randomBytes } from 'node:crypto';
import type { AstroCookies } from 'astro';
import { QueryTypes } from 'sequelize';
import * as z from 'zod';
import { sequelize } from '#db/client.ts';

const COOKIE = 'benchleaf_form';
const MINUTES = 10;
const MAX_CHARACTERS = 100_000;

const formMemorySchema = z.object({
  /** A sentence that says what was done. */
  notice: z.string().optional(),
  /** A sentence that says why the form was refused. */
  problem: z.string().optional(),
  values: z.record(z.string(), z.union([z.string(), z.array(z.string())])),
  errors: z.record(z.string(), z.string()),
});
export type FormMemory = z.infer<typeof formMemorySchema>;

const hash = (token: string) => createHash('sha256').update(token).digest('hex');

/** Keeps what was typed, and what to say about it, for the next page of this browser. */
export async function rememberForm(cookies: AstroCookies, memory: FormMemory): Promise<void> {
  // The database takes no NUL, and a refused form must not fail for what it was refused for.
  const data = JSON.stringify(memory, (_key, value: unknown) =>
    typeof value === 'string' ? value.replaceAll('\0', '') : value,
  );
  // Larger texts come from the plan editor, which keeps its own.
  if (data.length > MAX_CHARACTERS) return;
  const token = randomBytes(24).toString('base64url');
  await sequelize.query(
    `insert into form_memories (id, data, expires_at) values (:id, :data, now() + interval '${MINUTES} minutes')`,
    { replacements: { id: hash(token), data }, type: QueryTypes.INSERT },
  );
  cookies.set(COOKIE, token, { httpOnly: true, sameSite: 'lax', path: '/', maxAge: MINUTES * 60 });
}

/**
 * What the last form of this browser left behind; empty when there is none. The cookie is dropped, so that it shows once.
 * Reading changes nothing in the database: rows run out by themselves and are swept by a job.
 */
export async function recallForm(cookies: AstroCookies): Promise<FormMemory> {
  const empty: FormMemory = { values: {}, errors: {} };
  const token = cookies.get(COOKIE)?.value;
  if (!token) return empty;
  cookies.delete(COOKIE, { path: '/' });
  const rows = await sequelize.query<{ data: unknown }>(
    'select data from form_memories where id = :id and expires_at > now()',
    { replacements: { id: hash(token) }, type: QueryTypes.SELECT },
  );
  const memory = formMemorySchema.safeParse(rows[0]?.data);
  return memory.success ? memory.data : empty;
}

/** Removes what has run out. @returns how many rows went */
export async function sweepFormMemories(): Promise<number> {
  const rows = await sequelize.query('delete from form_memories where expires_at < now() returning 1', {
    type: QueryTypes.SELECT,
  });
  return rows.length;
}

/** A single remembered value, or the fallback. */
export function typedValue(memory: FormMemory, field: string, fallback = ''): string {
  const value = memory.values[field];
  return (Array.isArray(value) ? value[0] : value) ?? fallback;
}
