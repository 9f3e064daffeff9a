import { Answer, Build, Licence, Question, User, type Plan } from '#db/models/index.ts';
import { answerQuestion, askQuestion, writeBuild } from '#server/catalogue/talk.ts';
import { daysBefore } from './plans.ts';
import type { People } from './people.ts';

const TALK = [
  {
    plan: 'boot-bench',
    by: 'lukasz@benchleaf.example',
    body: 'My hall has a skirting board 16 mm thick. Do the dividers clear it, or should I notch them?',
    answerBy: 'wenna@benchleaf.example',
    answer:
      'Good that you ask: at 16 mm they touched. Revision B makes them 12 mm narrower than the sides; push the bench against the skirting and it clears.',
    daysAgo: 46,
  },
  {
    plan: 'boot-bench',
    by: 'reader1@benchleaf.example',
    body: 'Could the seat be made from two boards of oak instead of plywood?',
    answerBy: 'tomas@benchleaf.example',
    answer:
      'It could, but then it moves with the seasons, and the sides do not. Use slotted holes for the screws through the rail and leave the front edge off.',
    daysAgo: 20,
  },
  {
    plan: 'writing-desk',
    by: 'marguerite@benchleaf.example',
    body: 'Is there room for my knees at a height of 27 inches? I sit on a stool of 17 inches.',
    answerBy: 'rosalind@benchleaf.example',
    answer:
      'There are 21 3/4 in under the apron then, so about 4 3/4 in above the stool. Try it with a board on two boxes before you cut.',
    daysAgo: 62,
  },
];

const BUILDS = [
  {
    plan: 'boot-bench',
    by: 'reader2@benchleaf.example',
    verdict: 5,
    body: 'Built it at 1285 mm with four bays. Everything fitted the first time, also with a sheet that measured 17.4 mm.',
  },
  {
    plan: 'writing-desk',
    by: 'marguerite@benchleaf.example',
    verdict: 4,
    body: 'Walnut instead of cherry. The tapering step could say more about the sled, the sizes were all right.',
  },
];

const by = (email: string) => User.findOne({ where: { email }, rejectOnEmpty: true });

/** Questions with answers, and finished pieces, as readers wrote them. */
export async function seedTalk(people: People, plans: ReadonlyMap<string, Plan>): Promise<void> {
  for (const item of TALK) {
    const plan = plans.get(item.plan);
    if (!plan || (await Question.count({ where: { planId: plan.id, body: item.body } }))) continue;
    await askQuestion({ actor: await people.as(item.by), slug: plan.slug, body: item.body });
    const question = await Question.findOne({
      where: { planId: plan.id, body: item.body },
      rejectOnEmpty: true,
    });
    await answerQuestion({
      actor: await people.as(item.answerBy),
      questionId: question.id,
      body: item.answer,
    });
    await Question.update(
      { createdAt: daysBefore(item.daysAgo) },
      { where: { id: question.id }, silent: true },
    );
    await Answer.update(
      { createdAt: daysBefore(item.daysAgo - 1) },
      { where: { questionId: question.id }, silent: true },
    );
  }
  for (const item of BUILDS) {
    const plan = plans.get(item.plan);
    const user = await by(item.by);
    const licence =
      plan && (await Licence.findOne({ where: { planId: plan.id, userId: user.id, state: 'active' } }));
    if (!licence || (await Build.count({ where: { licenceId: licence.id } }))) continue;
    await writeBuild({
      actor: await people.as(item.by),
      licenceId: licence.id,
      body: item.body,
      verdict: item.verdict,
    });
  }
}
