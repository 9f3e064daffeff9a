import { randomUUID } from 'node:crypto';
import { Answer, Build, Imprint, ImprintMember, Licence, Plan, Question, User } from '#db/models/index.ts';
import { paths } from '#lib/paths.ts';
import type { Actor } from '../accounts/actor.ts';
import { requireMay, requireUser } from '../accounts/may.ts';
import { takeToken } from '../accounts/rate-limit.ts';
import { env } from '../env.ts';
import { refuse } from '../errors.ts';
import { writeEmail } from '../mail/write-email.ts';

const excerpt = (text: string) => (text.length > 400 ? `${text.slice(0, 400)} …` : text);

/** Asks the author of a plan; the people who write for the imprint are told by e-mail. @throws SIGN_IN_REQUIRED, NOT_FOUND, TOO_MANY */
export async function askQuestion(options: { actor: Actor; slug: string; body: string }): Promise<void> {
  const user = requireUser(options.actor);
  const plan = await Plan.findOne({ where: { slug: options.slug } });
  if (!plan) return refuse('NOT_FOUND');
  requireMay(user, 'question:ask', { planId: plan.id, imprintId: plan.imprintId, state: plan.state });
  await takeToken(`question:${user.id}`, { limit: 10, seconds: 3600 });
  const question = await Question.create({
    id: randomUUID(),
    planId: plan.id,
    userId: user.id,
    authorName: user.name,
    body: options.body.trim(),
  });
  const writers = await ImprintMember.findAll({
    where: { imprintId: plan.imprintId, role: ['owner', 'editor'] },
    include: [{ model: User, as: 'user', attributes: ['id', 'name', 'email'] }],
  });
  for (const { user: writer } of writers) {
    if (!writer) continue;
    await writeEmail({
      kind: 'question',
      reference: `question:${question.id}:${writer.id}`,
      to: { name: writer.name, address: writer.email },
      subject: `A question on ${plan.title}`,
      paragraphs: [`${user.name} asks:`, excerpt(options.body)],
      action: {
        label: 'Answer it',
        url: new URL(`${paths.officePlan(plan.id)}#questions`, env.SITE_URL).href,
      },
    });
  }
}

/** Answers a question; whoever asked is told. @throws NOT_FOUND, FORBIDDEN */
export async function answerQuestion(options: {
  actor: Actor;
  questionId: string;
  body: string;
}): Promise<{ slug: string; planId: string }> {
  const user = requireUser(options.actor);
  const question = await Question.findByPk(options.questionId, {
    include: [
      { model: Plan, as: 'plan' },
      { model: User, as: 'user' },
    ],
  });
  if (!question?.plan) return refuse('NOT_FOUND');
  const { plan } = question;
  requireMay(user, 'question:answer', { imprintId: plan.imprintId });
  const imprint = await Imprint.findByPk(plan.imprintId, { attributes: ['name'], rejectOnEmpty: true });
  const answer = await Answer.create({
    id: randomUUID(),
    questionId: question.id,
    userId: user.id,
    authorName: user.name,
    isImprint: user.imprints.has(plan.imprintId),
    body: options.body.trim(),
  });
  if (question.user) {
    await writeEmail({
      kind: 'answer',
      reference: `answer:${answer.id}`,
      to: { name: question.user.name, address: question.user.email },
      subject: `An answer on ${plan.title}`,
      paragraphs: [`You asked: ${excerpt(question.body)}`, `${imprint.name} answers:`, excerpt(options.body)],
      action: {
        label: 'See it with the plan',
        url: new URL(`${paths.plan(plan.slug)}#questions`, env.SITE_URL).href,
      },
    });
  }
  return { slug: plan.slug, planId: plan.id };
}

/** Shows a finished piece with a few words; one for each licence, and writing again replaces it. @throws LICENCE_ENDED, NOT_FOUND */
export async function writeBuild(options: {
  actor: Actor;
  licenceId: string;
  body: string;
  verdict: number;
}): Promise<void> {
  const user = requireUser(options.actor);
  const licence = await Licence.findByPk(options.licenceId);
  if (!licence) return refuse('NOT_FOUND');
  requireMay(user, 'build:write', licence);
  const content = { body: options.body.trim(), verdict: options.verdict, authorName: user.name };
  const existing = await Build.findOne({ where: { licenceId: licence.id } });
  if (existing) await existing.update(content);
  else
    await Build.create({
      id: randomUUID(),
      planId: licence.planId,
      licenceId: licence.id,
      userId: user.id,
      ...content,
    });
}

/** The questions on a plan with their answers, newest first, for the people who answer them. The caller has checked the right. */
export async function listQuestions(
  planId: string,
): Promise<{ id: string; by: string; body: string; at: string; answers: { by: string; body: string }[] }[]> {
  const questions = await Question.findAll({
    where: { planId },
    include: [{ model: Answer, as: 'answers', separate: true, order: [['createdAt', 'ASC']] }],
    order: [['createdAt', 'DESC']],
    limit: 50,
  });
  return questions.map((question) => ({
    id: question.id,
    by: question.authorName,
    body: question.body,
    at: question.createdAt.toISOString(),
    answers: (question.answers ?? []).map((answer) => ({ by: answer.authorName, body: answer.body })),
  }));
}
