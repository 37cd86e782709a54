import type { CaughtMailView } from '../../schemas/mail-views';
import type { MailSink } from './sink';

/** On globalThis, because the development server evaluates this module anew after a change. */
const holder: { merestoneSink?: MailSink } = globalThis as never;

/** Apart from the sink, whose packages only the demo has any use for. */
export function setMailSink(sink: MailSink): void {
	holder.merestoneSink = sink;
}

/** What the demo's sink caught, newest first; null where no sink runs. */
export function caughtMails(): readonly CaughtMailView[] | null {
	return holder.merestoneSink?.caught() ?? null;
}
