import { createTransport } from 'nodemailer';
import type { RenderedMail } from './discrepancy-mail';

export interface OutgoingMail extends RenderedMail {
	readonly to: { readonly name: string; readonly address: string };
	/** Fixed per outbox row: a mail sent twice after a crash is known as the same one. */
	readonly messageId: string;
}

export interface MailTransport {
	/** @throws Error when the server did not take it. */
	send(mail: OutgoingMail): Promise<void>;
	close(): void;
}

const TIMEOUT_MS = 20_000;

export function createSmtpTransport(url: string, from: string): MailTransport {
	const transporter = createTransport({
		url,
		connectionTimeout: TIMEOUT_MS,
		greetingTimeout: TIMEOUT_MS,
		socketTimeout: TIMEOUT_MS,
		// Nothing in a mail is ever read from a file or fetched from an address.
		disableFileAccess: true,
		disableUrlAccess: true
	});
	return {
		async send({ to, messageId, subject, text, html }) {
			await transporter.sendMail({
				from,
				to,
				messageId,
				subject,
				text,
				html,
				// RFC 3834: no holiday notes in answer, please.
				headers: { 'Auto-Submitted': 'auto-generated' }
			});
		},
		close: () => transporter.close()
	};
}
