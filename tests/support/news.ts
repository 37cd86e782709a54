import { eq } from 'drizzle-orm';
import type { Socket } from 'node:net';
import { simpleParser, type ParsedMail } from 'mailparser';
import { SMTPServer, type SMTPServerOptions } from 'smtp-server';
import type { NotificationKind } from '../../src/lib/ledger/notifications';
import type { Context } from '../../src/lib/server/context';
import {
	authorMessages,
	claims,
	commentMentions,
	comments,
	tasks
} from '../../src/lib/server/db/schema';
import { newId } from '../../src/lib/server/ids';
import { sendDueMails } from '../../src/lib/server/mail/sender';
import { createSmtpTransport } from '../../src/lib/server/mail/transport';
import { enterClaim } from '../../src/lib/server/services/claims/enter-claim';
import { notify, type Notice } from '../../src/lib/server/services/notifications/notify';
import { claimFields, type ServiceWorld } from './service';

export const FROM = 'Merestone <ledger@merestone.example>';
export const ORIGIN = 'https://merestone.example';
/** Hostile everywhere a person can write. */
export const HOSTILE = '<script>alert(1)</script> & "quotes"\r\nBcc: all@reading.example';

/** Rows for news of every kind, written directly: what is told here is not how they come about. */
export interface NewsRows {
	readonly claimId: string;
	readonly claimNumber: number;
	readonly taskId: string;
	readonly commentId: string;
	readonly messageId: string;
}

export async function newsRows(
	world: ServiceWorld,
	over: { readonly task?: Partial<typeof tasks.$inferInsert>; readonly text?: string } = {}
): Promise<NewsRows> {
	const { member, maintainer } = world.as;
	const text = over.text ?? HOSTILE;
	const { number } = await enterClaim(member, claimFields({ printed: '2.8248', locator: text }));
	const [claim] = await world.db.read.select().from(claims).where(eq(claims.number, number));
	if (!claim) throw new Error('the claim was not stored');
	const at = new Date();
	const [taskId, commentId, messageId] = [newId(), newId(), newId()];
	const groupId = member.group.id;
	await world.db.write(async (tx) => {
		await tx.insert(tasks).values({
			id: taskId,
			groupId,
			number: 4,
			claimId: claim.id,
			kind: 'recompute',
			state: 'assigned',
			assigneeId: member.actor.id,
			dueOn: '2026-12-14',
			instructions: text,
			createdBy: maintainer.actor.id,
			createdAt: at,
			updatedAt: at,
			...over.task
		});
		await tx.insert(comments).values({
			id: commentId,
			groupId,
			subject: 'task',
			subjectId: taskId,
			authorId: maintainer.actor.id,
			body: text,
			createdAt: at
		});
		await tx
			.insert(commentMentions)
			.values({ commentId, userId: member.actor.id, handle: 'mo.member' });
		await tx.insert(authorMessages).values({
			id: messageId,
			claimId: claim.id,
			name: text,
			email: 'mira.arden@author.example',
			message: text,
			sentAt: at
		});
	});
	return { claimId: claim.id, claimNumber: number, taskId, commentId, messageId };
}

export function setTask(
	world: ServiceWorld,
	{ taskId }: NewsRows,
	values: Partial<typeof tasks.$inferInsert>
): Promise<unknown> {
	return world.db.write((tx) => tx.update(tasks).set(values).where(eq(tasks.id, taskId)));
}

/** Tells the member of the world, as the maintainer unless somebody else is named. */
export function tell(
	world: ServiceWorld,
	kind: NotificationKind,
	over: Partial<Notice> = {},
	ctx: Pick<Context, 'actor' | 'now'> = world.as.maintainer
): Promise<number> {
	const { group, actor } = world.as.member;
	return world.db.write((tx) =>
		notify(tx, ctx, {
			kind,
			groupId: group.id,
			recipients: [actor.id],
			event: newId(),
			...over
		})
	);
}

export interface Catcher {
	readonly url: string;
	/** Whole mails as they came over the wire, newest last. */
	readonly raw: readonly Buffer[];
	parsed(): Promise<readonly ParsedMail[]>;
	/** Cuts every connection at once, as a killed process does. */
	hangUp(): void;
	close(): Promise<void>;
}

/** An SMTP server that keeps the bytes; `options` make it refuse, stall or hang up. */
export async function startCatcher(options: SMTPServerOptions = {}): Promise<Catcher> {
	const raw: Buffer[] = [];
	const server = new SMTPServer({
		authOptional: true,
		disabledCommands: ['AUTH', 'STARTTLS'],
		onData(stream, _session, done) {
			const chunks: Buffer[] = [];
			stream.on('data', (chunk: Buffer) => chunks.push(chunk));
			stream.on('end', () => {
				raw.push(Buffer.concat(chunks));
				done();
			});
		},
		...options
	});
	server.on('error', () => undefined);
	const sockets = new Set<Socket>();
	server.server.on('connection', (socket: Socket) => sockets.add(socket));
	await new Promise<void>((resolve) => server.listen(0, '127.0.0.1', () => resolve()));
	const address = server.server.address();
	const port = typeof address === 'object' ? address?.port : 0;
	return {
		url: `smtp://127.0.0.1:${port}`,
		raw,
		parsed: () => Promise.all(raw.map((message) => simpleParser(message))),
		hangUp() {
			for (const socket of sockets) socket.destroy();
			sockets.clear();
		},
		close: () => new Promise((resolve) => server.close(() => resolve()))
	};
}

export interface SendOptions {
	readonly at?: Date;
	readonly silenceMs?: number;
	readonly wholeMs?: number;
	readonly signal?: AbortSignal;
}

/** One turn of the sender against that server. */
export async function sendTo(
	world: Pick<ServiceWorld, 'db'>,
	url: string,
	{ at = new Date(), signal, ...limits }: SendOptions = {}
): Promise<number> {
	const transport = createSmtpTransport(url, FROM, limits);
	try {
		return await sendDueMails({
			db: world.db,
			transport,
			origin: ORIGIN,
			now: () => at,
			...(signal && { signal })
		});
	} finally {
		transport.close();
	}
}
