import { config } from './config';
import { openDatabase, type Database, type OpenDatabase } from './db/client';

declare global {
	/**
	 * The one open database of the process. It hangs on globalThis because the development server
	 * evaluates this module anew after a change, and a second writing connection must never open.
	 */
	var merestoneDatabase: Promise<OpenDatabase> | undefined;
}

/** Opens the database at the first call. @throws Error when the file can't be used */
export async function openApplication(): Promise<OpenDatabase> {
	globalThis.merestoneDatabase ??= openDatabase(config().databaseUrl);
	try {
		const opened = await globalThis.merestoneDatabase;
		database = opened.db;
		return opened;
	} catch (error) {
		globalThis.merestoneDatabase = undefined;
		throw error;
	}
}

let database: Database | undefined;

/** The database that `openApplication` opened. */
export function openedDatabase(): Database {
	if (!database) throw new Error('The database is not open yet.');
	return database;
}
