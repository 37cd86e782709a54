import { frameHtml } from './frame-html';
import { frameText } from './frame-text';
import { headerText } from './header-text';
import type { MailContent, RenderedMail } from './mail-content';

/** The same facts as plain text and as HTML, in the one look all mails have. */
export function renderMail(content: MailContent): RenderedMail {
	const subject = headerText(content.subject);
	return { subject, text: frameText(content), html: frameHtml(content, subject) };
}
