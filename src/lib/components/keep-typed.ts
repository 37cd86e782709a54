import { enhance } from '$app/forms';
import { invalidateAll } from '$app/navigation';
import type { ActionResult, SubmitFunction } from '@sveltejs/kit';
import { mount, unmount } from 'svelte';
import NotSent from './NotSent.svelte';
import { whyNotSent } from './why-not-sent';

/** Someone else changed what the form is about; the status of `conflict`. */
const CONFLICT = 409;

export interface KeepTyped {
	/** Empties the fields once the answer is good. */
	reset?: boolean;
	/** Whether the page loads again once the answer is good. */
	invalidateAll?: boolean;
	onsend?: () => void;
	/** After the page took in the answer, or the reason why there is none is shown. */
	onanswer?: (result: ActionResult) => void | Promise<void>;
}

/**
 * For `use:keepTyped` on a form: sends it from the page's script, once at a time. An answer that
 * would take the page away (signed out, no connection, an error) leaves it and all that was typed,
 * and says above the button what to do. After a conflict the page shows what stands now.
 */
export function keepTyped(form: HTMLFormElement, given: KeepTyped = {}) {
	let options = given;
	let sending = false;
	let takeBack = () => {};

	const submit: SubmitFunction = ({ submitter, cancel }) => {
		if (sending) {
			cancel();
			return;
		}
		sending = true;
		takeBack();
		takeBack = () => {};
		const focused = document.activeElement;
		const buttons = sendersOf(form);
		for (const button of buttons) button.disabled = true;
		options.onsend?.();
		return async ({ result, update }) => {
			try {
				if (result.type === 'error') takeBack = say(form, submitter, result);
				else await update(options);
				// The form's answer stays: only what the page loads is asked for again.
				if (result.type === 'failure' && result.status === CONFLICT) await invalidateAll();
				await options.onanswer?.(result);
			} finally {
				sending = false;
				for (const button of buttons) button.disabled = false;
				// Disabling took the focus from the button that was pressed.
				const refused = result.type === 'error' || result.type === 'failure';
				if (refused && focused === submitter && document.activeElement === document.body)
					submitter?.focus();
			}
		};
	};
	const enhanced = enhance(form, submit);
	return {
		update(next: KeepTyped = {}) {
			options = next;
		},
		destroy() {
			enhanced.destroy();
			takeBack();
		}
	};
}

/** The buttons that send it and can be pressed now. */
function sendersOf(form: HTMLFormElement): readonly HTMLButtonElement[] {
	return [...form.elements]
		.filter((element) => element instanceof HTMLButtonElement)
		.filter(({ type, disabled }) => type === 'submit' && !disabled);
}

/** Puts the reason above the row of the button, and gives back what takes it away. */
function say(
	form: HTMLFormElement,
	submitter: HTMLElement | null,
	result: Extract<ActionResult, { type: 'error' }>
): () => void {
	const place = document.createElement('div');
	place.className = 'mb-3 basis-full';
	const row = submitter?.parentElement;
	if (row && row !== form && form.contains(row)) row.before(place);
	else form.prepend(place);
	const notice = mount(NotSent, { target: place, props: whyNotSent(result) });
	place.scrollIntoView({ block: 'nearest' });
	return () => {
		void unmount(notice);
		place.remove();
	};
}
