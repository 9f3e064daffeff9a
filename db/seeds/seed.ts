/** `npm run db:seed`: the demo, made through the same services that people use. It may be run again and changes nothing then. */
import { sequelize } from '#db/client.ts';
import { Licence, Order, OutboxEmail, SavedFit } from '#db/models/index.ts';
import { env } from '#server/env.ts';
import { requestCopy } from '#server/copies/request-copy.ts';
import { saveFit } from '#server/licences/save-fit.ts';
import { ensureBucket } from '#server/storage/object-store.ts';
import { seedImprints } from './imprints.ts';
import { seedOrders } from './orders.ts';
import { seedPeople, type People } from './people.ts';
import { seedPlans } from './plans.ts';
import { seedTalk } from './talk.ts';

/** A fit and a copy for the buyer who is signed in as, so that the drawer is not empty. */
async function seedDrawer(people: People, planId: string): Promise<void> {
  const actor = await people.as('lukasz@benchleaf.example');
  const licence = await Licence.findOne({ where: { userId: actor.id, planId, state: 'active' } });
  if (!licence || (await SavedFit.count({ where: { userId: actor.id, planId } }))) return;
  const fit = {
    values: {
      width: 985_000_000,
      depth: 355_600_000,
      height: 460_000_000,
      bays: 3,
      foot: 'pads',
      slide: 250_000_000,
    },
    measured: { ply: 17_600_000 },
    units: 'mm',
  };
  const saved = await saveFit({ actor, planId, name: 'Hall, left wall', fit });
  await requestCopy({ actor, licenceId: licence.id, fitId: saved.id, fit, paper: 'a4' });
}

async function seed(): Promise<void> {
  if (env.NODE_ENV === 'production' && !env.DEMO)
    throw new Error('The demo is not seeded into a public site; set DEMO=yes where it is wanted.');
  const ordersBefore = await Order.count();
  await ensureBucket();
  console.log('people …');
  const people = await seedPeople();
  console.log('imprints …');
  const imprints = await seedImprints(people);
  console.log('plans, each through its range proof …');
  const plans = await seedPlans(people, imprints);
  console.log('orders of half a year …');
  await seedOrders(people, imprints, [...plans.values()]);
  console.log('questions and builds …');
  await seedTalk(people, plans);
  const bench = plans.get('boot-bench');
  if (bench) await seedDrawer(people, bench.id);
  const orders = await Order.count();
  if (orders > ordersBefore) {
    // The mails of half a year are not all delivered on the first morning.
    await OutboxEmail.update({ state: 'sent', sentAt: new Date() }, { where: { state: 'waiting' } });
    console.log(`The demo is ready: ${String(plans.size)} plans, ${String(orders)} orders.`);
  } else console.log('The demo is there already; nothing was changed.');
}

await seed().finally(() => sequelize.close());
