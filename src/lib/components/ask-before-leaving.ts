import { beforeNavigate } from '$app/navigation';
import type { BeforeNavigate } from '@sveltejs/kit';

const QUESTION = 'What you typed is not sent yet. Leave it?';
/** The way that was asked about: of several forms on a page only one asks. */
let asked: BeforeNavigate | null = null;

/**
 * Asks before the page goes while a form holds something unsent; called while its component starts.
 * Closing the tab asks in the browser's own words.
 */
export function askBeforeLeaving(unsent: () => boolean): void {
	beforeNavigate((leaving) => {
		if (asked === leaving || !unsent()) return;
		// Another address of the same page keeps its forms.
		if (!leaving.willUnload && leaving.to?.url.pathname === leaving.from?.url.pathname) return;
		asked = leaving;
		if (leaving.type === 'leave' || !window.confirm(QUESTION)) leaving.cancel();
	});
}
