/** Hints from the services to the runner. Losing one costs seconds: the table is what counts. */
type Hint = { readonly kind: 'queued' } | { readonly kind: 'stop'; readonly id: string };
type Listener = (hint: Hint) => void;

const listeners = new Set<Listener>();

const send = (hint: Hint) => listeners.forEach((listener) => listener(hint));

/** Something was queued; call it after the transaction. */
export const announceQueued = () => send({ kind: 'queued' });

/** A run was cancelled: its thread can be freed. */
export const stopRun = (id: string) => send({ kind: 'stop', id });

/** @returns what ends the listening */
export function onHint(listener: Listener): () => void {
	listeners.add(listener);
	return () => listeners.delete(listener);
}
