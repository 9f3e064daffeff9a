import { Imprint, ImprintMember, User } from '#db/models/index.ts';
import { applyForImprint } from '#server/publishing/apply-for-imprint.ts';
import { setImprintState } from '#server/staff/keep-house.ts';
import type { People } from './people.ts';

const IMPRINTS = [
  {
    owner: 'wenna@benchleaf.example',
    name: 'Low Fell Joinery',
    about:
      'Wenna Aldous builds fitted furniture for old houses whose walls have ideas of their own, and writes down how.',
  },
  {
    owner: 'rosalind@benchleaf.example',
    name: 'Marram Bench',
    about:
      'Rosalind Sato makes light furniture in solid wood for small rooms. All her plans are in inches and run in millimetres too.',
  },
];

async function addMember(imprintId: string, email: string, role: 'editor' | 'bookkeeper'): Promise<void> {
  const user = await User.findOne({ where: { email }, rejectOnEmpty: true });
  await ImprintMember.findOrCreate({
    where: { imprintId, userId: user.id },
    defaults: { imprintId, userId: user.id, role },
  });
}

/** The two imprints, applied for by their owners and admitted by the staff; the first has an editor and a bookkeeper. */
export async function seedImprints(people: People): Promise<{ lowFell: Imprint; marram: Imprint }> {
  const staff = await people.as('pia@benchleaf.example');
  const made: Imprint[] = [];
  for (const { owner, name, about } of IMPRINTS) {
    const existing = await Imprint.findOne({ where: { name } });
    if (!existing) await applyForImprint({ actor: await people.as(owner), name, about });
    const imprint = existing ?? (await Imprint.findOne({ where: { name }, rejectOnEmpty: true }));
    if (imprint.state === 'applied') await setImprintState(staff, imprint.id, 'active');
    made.push(await imprint.reload());
  }
  const [lowFell, marram] = made;
  if (!lowFell || !marram) throw new Error('the imprints of the demo were not made');
  await addMember(lowFell.id, 'tomas@benchleaf.example', 'editor');
  await addMember(lowFell.id, 'ida@benchleaf.example', 'bookkeeper');
  return { lowFell, marram };
}
