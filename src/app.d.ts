import type { Actor } from '$lib/server/context';

declare global {
	namespace App {
		interface Locals {
			requestId: string;
			/** Null for a visitor who has not signed in. */
			actor: Actor | null;
			sessionId: string | null;
		}
		interface Error {
			message: string;
			/** Id of an unexpected error in the log. */
			id?: string;
		}
	}
}

export {};
