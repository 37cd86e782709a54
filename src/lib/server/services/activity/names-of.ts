import { and, inArray, sql, type Column } from 'drizzle-orm';
import type { GroupContext } from '../../context';
import type { Reader } from '../../db/client';
import {
	claims,
	comments,
	inequalities,
	references,
	submissions,
	tasks,
	users
} from '../../db/schema';

const ID = /^[0-9a-f]{8}-[0-9a-f]{4}-[0-9a-f]{4}-[0-9a-f]{4}-[0-9a-f]{12}$/;

export const isId = (value: unknown): value is string =>
	typeof value === 'string' && ID.test(value);

export interface Named {
	/** As it stands in a sentence: a name, `claim 12`, `task 4`, a paper's short form. */
	readonly words: string;
	/** Below the group's address; null where it has no page. */
	readonly path: string | null;
	/** Of a comment or submission: what it is on; of a task: its claim. */
	readonly on?: string;
}

/** Words for all that audit rows name by id, within the group. */
export async function namesOf(
	read: Reader,
	ctx: GroupContext,
	ids: Iterable<string>
): Promise<ReadonlyMap<string, Named>> {
	const named = new Map<string, Named>();
	const first = [...new Set(ids)].filter(isId);
	// The plus keeps SQLite to the ids: without it, it reads all rows of the group.
	const isHere = (groupId: Column) => sql`+${groupId} = ${ctx.group.id}`;
	const talk = await read
		.select()
		.from(comments)
		.where(and(isHere(comments.groupId), inArray(comments.id, first)));
	const handed = await read
		.select({ id: submissions.id, taskId: submissions.taskId })
		.from(submissions)
		.where(inArray(submissions.id, first));
	const known = [
		...new Set([
			...first,
			...talk.map(({ subjectId }) => subjectId),
			...handed.map(({ taskId }) => taskId)
		])
	];
	const work = await read
		.select({ id: tasks.id, number: tasks.number, claimId: tasks.claimId })
		.from(tasks)
		.where(and(isHere(tasks.groupId), inArray(tasks.id, known)));
	const aims = [...known, ...work.map(({ claimId }) => claimId)];
	for (const { id, number } of await read
		.select({ id: claims.id, number: claims.number })
		.from(claims)
		.where(and(isHere(claims.groupId), inArray(claims.id, aims)))) {
		named.set(id, { words: `claim ${number}`, path: `/claims/${number}` });
	}
	for (const { id, number, claimId } of work) {
		named.set(id, { words: `task ${number}`, path: `/tasks/${number}`, on: claimId });
	}
	for (const { id, name } of await read
		.select({ id: users.id, name: users.name })
		.from(users)
		.where(inArray(users.id, known))) {
		named.set(id, { words: name, path: '/members' });
	}
	for (const { id, short } of await read
		.select({ id: references.id, short: references.short })
		.from(references)
		.where(and(isHere(references.groupId), inArray(references.id, known)))) {
		named.set(id, { words: short, path: `/references/${id}` });
	}
	for (const { id, name, scenario } of await read
		.select({ id: inequalities.id, name: inequalities.name, scenario: inequalities.scenario })
		.from(inequalities)
		.where(inArray(inequalities.id, known))) {
		const words = name ?? `an inequality (${scenario})`;
		named.set(id, { words, path: `/inequalities/${id}` });
	}
	for (const { id, subjectId } of talk) {
		const path = named.get(subjectId)?.path ?? null;
		named.set(id, { words: 'a comment', path: path && `${path}#comment-${id}`, on: subjectId });
	}
	for (const { id, taskId } of handed) {
		const path = named.get(taskId)?.path ?? null;
		if (path) named.set(id, { words: 'a submission', path, on: taskId });
	}
	return named;
}
