import { escape, ICalCalendar, ICalEventTransparency } from 'ical-generator';
import { RELATION_SIGNS, type Relation } from '../../ledger/claim';
import {
	TASK_KIND_LABELS,
	TASK_STATE_LABELS,
	type TaskKind,
	type TaskState
} from '../../ledger/tasks';

export interface DueTask {
	readonly id: string;
	readonly number: number;
	readonly version: number;
	readonly kind: TaskKind;
	readonly state: TaskState;
	/** `YYYY-MM-DD`. */
	readonly dueOn: string | null;
	readonly updatedAt: Date;
	/** A name; null: open to all. */
	readonly assignee: string | null;
	readonly groupSlug: string;
	readonly groupName: string;
	readonly claimNumber: number;
	readonly quantity: string;
	readonly subject: string;
	/** The inequality's name, where it has one. */
	readonly inequality: string | null;
	readonly relation: Relation;
	readonly printed: string;
	readonly paper: string;
	readonly locator: string;
}

export interface DueDates {
	readonly name: string;
	/** The page that shows the same. */
	readonly address: string;
	readonly origin: string;
	readonly tasks: readonly DueTask[];
}

/** How often a calendar program is asked to look again; many look less often whatever is asked. */
const REFRESH_SECONDS = 3_600;

/**
 * Due dates as iCalendar text (RFC 5545; REFRESH-INTERVAL and NAME of RFC 7986): whole days, each
 * task one event. An event keeps its UID and counts its changes, so that a calendar that knows it
 * moves it; a task that ended is not in the text any more. Nothing in it depends on the clock: the
 * same tasks give the same bytes.
 */
export function dueDatesCalendar({ name, address, origin, tasks }: DueDates): string {
	const calendar = new ICalCalendar({
		prodId: { company: 'Merestone', product: 'Due dates', language: 'EN' },
		// The library escapes the texts of events, but not the calendar's name.
		name: escape(oneLine(name), false),
		url: address,
		ttl: REFRESH_SECONDS
	});
	for (const task of tasks) {
		if (task.dueOn === null) continue;
		calendar.createEvent({
			id: task.id,
			sequence: task.version,
			// Without a METHOD both say when this version was made (RFC 5545, 3.8.7.2).
			stamp: task.updatedAt,
			lastModified: task.updatedAt,
			start: task.dueOn,
			allDay: true,
			summary: oneLine(`Task ${task.number} due: ${TASK_KIND_LABELS[task.kind]}`),
			description: describe(task),
			url: `${origin}/g/${task.groupSlug}/tasks/${task.number}`,
			// A due date takes up nobody's day.
			transparency: ICalEventTransparency.TRANSPARENT
		});
	}
	// Every content line ends with CRLF (RFC 5545, 3.1), the last one too.
	return `${calendar.toString()}\r\n`;
}

function describe(task: DueTask): string {
	const { quantity, inequality, subject, relation, printed, paper, locator } = task;
	return [
		`Claim ${task.claimNumber}: ${quantity} of ${inequality ?? shorten(subject)} ` +
			`${RELATION_SIGNS[relation]} ${printed}`,
		`${paper}, ${locator}`,
		task.assignee === null
			? TASK_STATE_LABELS[task.state]
			: `${TASK_STATE_LABELS[task.state]}, ${task.assignee}`,
		task.groupName
	]
		.map(oneLine)
		.join('\n');
}

/** An expression may be as long as a page; a calendar's entry shows a few lines. */
const LONGEST_SUBJECT = 200;

function shorten(text: string): string {
	return text.length > LONGEST_SUBJECT ? `${text.slice(0, LONGEST_SUBJECT).trimEnd()} …` : text;
}

/** Control characters have no place in iCalendar text, and a line's end would begin another. */
function oneLine(text: string): string {
	return text.replace(/[\p{Cc}\u2028\u2029]+/gu, ' ').trim();
}
