import { openTasksInput, submitInput } from '../../src/lib/schemas/task-input';
import { acceptSubmission } from '../../src/lib/server/services/tasks/accept-submission';
import { cancelTask } from '../../src/lib/server/services/tasks/cancel-task';
import { openTasks } from '../../src/lib/server/services/tasks/open-tasks';
import { returnSubmission } from '../../src/lib/server/services/tasks/return-submission';
import { startTask } from '../../src/lib/server/services/tasks/start-task';
import { submitTask } from '../../src/lib/server/services/tasks/submit-task';
import type { GroupContext } from '../../src/lib/server/context';
import type { UploadedFile } from '../../src/lib/server/services/evidence-files/keep-files';
import type { Story } from './story';
import { dayFromToday } from './story-clock';

type Asked = Partial<ReturnType<(typeof openTasksInput)['parse']>>;

/** Tasks in every state, as an invented group would have them after two weeks. */
export async function tellTasks(story: Story): Promise<void> {
	await acceptedReproduction(story);
	await waitingReproduction(story);
	await contradictedReproduction(story);
	await returnedSearch(story);
	await disputedTranscription(story);
	await notBegunYet(story);
}

async function ask(
	{ numbers }: Story,
	by: GroupContext,
	claim: string,
	asked: Asked
): Promise<number> {
	const number = numbers.get(claim);
	if (number === undefined) throw new Error(`The seed has no claim ${claim}.`);
	const opened = await openTasks(by, openTasksInput.parse({ claims: [number], ...asked }));
	const [task] = opened.numbers;
	if (task === undefined) throw new Error(`No task was opened on ${claim}.`);
	return task;
}

const file = (name: string, text: string): UploadedFile => ({
	name,
	bytes: new TextEncoder().encode(text)
});

/** A key rate no solver serves: reproduced by a person, accepted by another, so in Agreement. */
async function acceptedReproduction(story: Story): Promise<void> {
	const { clock, people } = story;
	clock.set(12);
	const number = await ask(story, people.owner, 'key-rate', {
		kind: 'recompute',
		assigneeId: people.member.actor.id,
		dueOn: dayFromToday(-3),
		instructions:
			'Theorem 2 gives $r \\ge 1 - h(Q) - h\\!\\left(\\frac{1 + \\sqrt{(S/2)^2 - 1}}{2}\\right)$. Please evaluate it at the error rate of their Fig. 4, $Q = 3.25\\,\\%$ and $S = 2\\sqrt{2}\\,(1 - 2Q)$.'
	});
	clock.set(11, 16);
	await startTask(people.member, number);
	clock.set(10, 12);
	const value = submitInput.parse({
		kind: 'value',
		printed: '0.4369',
		program: 'mpmath',
		programVersion: '1.3.0',
		method: 'Direct evaluation with 50 digits'
	});
	await submitTask(people.member, number, value, []);
	clock.set(10, 17);
	await returnSubmission(
		people.owner,
		number,
		'Please add the script, so that the next one does not have to write it again.'
	);
	clock.set(9, 14);
	const again = submitInput.parse({
		...value,
		printed: '0.436944',
		comment: 'The script is attached; it prints $r = 0.436944$ for $S = 2.644579$.'
	});
	await submitTask(people.member, number, again, [file('key_rate.py', KEY_RATE_SCRIPT)]);
	clock.set(9, 17);
	await acceptSubmission(people.owner, number);
}

const KEY_RATE_SCRIPT = `from mpmath import mp, mpf, log, sqrt

mp.dps = 50


def h(p):
    return -p * log(p, 2) - (1 - p) * log(1 - p, 2)


Q = mpf("0.0325")
S = 2 * sqrt(2) * (1 - 2 * Q)
print(1 - h(Q) - h((1 + sqrt((S / 2) ** 2 - 1)) / 2))
`;

/** Submitted, and waiting for somebody else. */
async function waitingReproduction(story: Story): Promise<void> {
	const { clock, people } = story;
	clock.set(6);
	const number = await ask(story, people.owner, 'threshold', {
		kind: 'recompute',
		assigneeId: people.maintainer.actor.id,
		dueOn: dayFromToday(2),
		instructions: 'Solve $2\\,I_2(E) = 1$ for the isotropic box and a noiseless channel.'
	});
	clock.set(3, 15);
	const value = submitInput.parse({
		kind: 'value',
		printed: '0.779944',
		program: 'Own script, bisection',
		programVersion: '2026-11',
		method: 'Root of 1 - h((1 + E)/2) = 1/2'
	});
	await submitTask(people.maintainer, number, value, [
		file('threshold.csv', 'E,information\n0.77994,0.499994\n0.77995,0.500009\n')
	]);
}

/** Accepted by a person, then shown to contradict a certificate: its task is taken up again. */
async function contradictedReproduction(story: Story): Promise<void> {
	const { clock, people } = story;
	clock.set(8, 13);
	const number = await ask(story, people.owner, 'i3322-more-digits', {
		kind: 'recompute',
		assigneeId: people.member.actor.id,
		dueOn: dayFromToday(5),
		instructions: 'Two more digits from below would settle it.'
	});
	clock.set(6, 13);
	const value = submitInput.parse({
		kind: 'value',
		printed: '0.25147',
		program: 'Own script',
		programVersion: '25 November',
		method: 'Moment matrix with products of one operator a party'
	});
	await submitTask(people.member, number, value, []);
	clock.set(6, 16);
	await acceptSubmission(people.maintainer, number);
}

/** Returned with a reason. */
async function returnedSearch(story: Story): Promise<void> {
	const { clock, people } = story;
	clock.set(7, 13);
	const number = await ask(story, people.maintainer, 'cglmp3-taken-for-maximum', {
		kind: 'find-code',
		assigneeId: people.member.actor.id,
		dueOn: dayFromToday(6),
		instructions: 'They thank someone for a program. Is it to be had?'
	});
	clock.set(5, 14);
	const found = submitInput.parse({
		kind: 'statement',
		comment: 'There is an archive with the thesis it comes from.'
	});
	await submitTask(people.member, number, found, []);
	clock.set(5, 17);
	await returnSubmission(people.maintainer, number, 'Which version printed the value in Table I?');
}

/** A comparison with the paper that finds a slip of ours. */
async function disputedTranscription(story: Story): Promise<void> {
	const { clock, people } = story;
	clock.set(5);
	const number = await ask(story, people.owner, 'chained3-missing', {
		kind: 'confirm-transcription',
		assigneeId: people.maintainer.actor.id,
		dueOn: dayFromToday(-1)
	});
	clock.set(4, 16);
	const compared = submitInput.parse({
		kind: 'transcription',
		valueMatches: 'no',
		locatorMatches: 'yes',
		inequalityMatches: 'yes',
		comment: 'The paper prints a digit more.'
	});
	await submitTask(people.maintainer, number, compared, []);
	clock.set(3);
	await acceptSubmission(people.owner, number);
}

/** Open to all, assigned, in progress, overdue, cancelled. */
async function notBegunYet(story: Story): Promise<void> {
	const { clock, people } = story;
	clock.set(9);
	const overdue = await ask(story, people.owner, 'i3322-level-taken-for-quantum', {
		kind: 'ask-authors',
		assigneeId: people.maintainer.actor.id,
		dueOn: dayFromToday(-2),
		instructions: 'Which level was run for Table II, row 4?'
	});
	clock.set(8, 16);
	await startTask(people.maintainer, overdue);
	clock.set(4);
	await ask(story, people.maintainer, 'chained4-mistyped', {
		kind: 'confirm-transcription',
		dueOn: dayFromToday(9)
	});
	await ask(story, people.owner, 'efficiency', {
		kind: 'check-derivation',
		assigneeId: people.member.actor.id,
		dueOn: dayFromToday(2),
		instructions:
			'Does the figure assume that the no-click event is kept as a third outcome? Then $2(\\sqrt{2} - 1)$ is the closed form to compare with.'
	});
	const cancelled = await ask(story, people.maintainer, 'chsh-reversed', {
		kind: 'other',
		instructions: 'Look for a second printing.'
	});
	clock.set(3, 12);
	await cancelTask(people.maintainer, cancelled, 'There was one printing only.');
}
