import { browser } from '$app/environment';

const KEY = 'merestone-single-keys';

/** Whether single keys act as shortcuts; a person can switch them off (kept in this browser). */
class Shortcuts {
	on = $state(true);
	/** Search fields on the page: without one the key does nothing and is not offered. */
	searches = $state(0);

	constructor() {
		if (browser) this.on = localStorage.getItem(KEY) !== 'off';
	}

	set(on: boolean) {
		this.on = on;
		localStorage.setItem(KEY, on ? 'on' : 'off');
	}
}

export const shortcuts = new Shortcuts();

/** True while the keys belong to something that takes text. */
export function isTyping(target: EventTarget | null): boolean {
	return (
		target instanceof HTMLElement &&
		(target.isContentEditable || /^(INPUT|TEXTAREA|SELECT)$/.test(target.tagName))
	);
}
