import { createTransport } from 'nodemailer';
import { headerText } from './header-text';
import type { RenderedMail } from './mail-content';
import type { MailHeaders } from './mail-headers';

export interface OutgoingMail extends RenderedMail {
	readonly to: { readonly name: string; readonly address: string };
	/** Fixed per outbox row: a mail sent twice after a crash is known as the same one. */
	readonly messageId: string;
	readonly headers: MailHeaders;
	readonly replyTo?: string;
}

export interface MailTransport {
	/** @throws Error when the server did not take it. */
	send(mail: OutgoingMail): Promise<void>;
	close(): void;
}

/** Silence of the server after which a mail is left for later; a healthy one answers in seconds. */
const SILENCE_MS = 15_000;
/** The whole of one mail, also when the server keeps sending a byte now and then. */
const WHOLE_MS = 30_000;

export function createSmtpTransport(
	url: string,
	from: string,
	{ silenceMs = SILENCE_MS, wholeMs = WHOLE_MS } = {}
): MailTransport {
	const transporter = createTransport({
		url,
		connectionTimeout: silenceMs,
		greetingTimeout: silenceMs,
		socketTimeout: silenceMs,
		// Nothing in a mail is ever read from a file or fetched from an address.
		disableFileAccess: true,
		disableUrlAccess: true
	});
	return {
		async send({ to, replyTo, messageId, subject, text, html, headers }) {
			const sending = transporter.sendMail({
				from,
				to: { name: headerText(to.name), address: to.address },
				...(replyTo !== undefined && { replyTo: { name: '', address: replyTo } }),
				messageId,
				subject,
				text,
				html,
				headers
			});
			await within(wholeMs, sending);
		},
		close: () => transporter.close()
	};
}

async function within(ms: number, work: Promise<unknown>): Promise<void> {
	let timer: ReturnType<typeof setTimeout> | undefined;
	const late = new Promise<never>((_, reject) => {
		timer = setTimeout(() => reject(new Error(`The mail server took more than ${ms} ms.`)), ms);
	});
	try {
		await Promise.race([work, late]);
	} finally {
		clearTimeout(timer);
		// Its end comes later and is of no more interest.
		work.catch(() => undefined);
	}
}

/** The server answered 5yz to the recipient's address itself, not to signing in or the content. */
export function isRefusedForGood(error: Error): boolean {
	const code: unknown = Reflect.get(error, 'responseCode');
	const command: unknown = Reflect.get(error, 'command');
	return command === 'RCPT TO' && typeof code === 'number' && code >= 500 && code < 600;
}
