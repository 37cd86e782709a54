import { createHash } from 'node:crypto';
import { createClient } from '@libsql/client';

/** A digest of each table's rows, so that a test can say what a request wrote. */
export async function tableDigests(
	databaseUrl: string,
	except: readonly string[] = []
): Promise<Readonly<Record<string, string>>> {
	const client = createClient({ url: databaseUrl });
	try {
		const { rows } = await client.execute(
			"SELECT name FROM sqlite_master WHERE type = 'table' AND name NOT LIKE 'sqlite_%'"
		);
		const digests: Record<string, string> = {};
		for (const name of rows.map((row) => String(row.name)).sort()) {
			if (except.includes(name)) continue;
			const all = await client.execute(`SELECT * FROM "${name}"`);
			const lines = all.rows.map((row) => JSON.stringify(Object.values(row))).sort();
			digests[name] = createHash('sha256').update(lines.join('\n')).digest('hex');
		}
		return digests;
	} finally {
		client.close();
	}
}

/** One value of the database, as text; empty when there is no such row. */
export async function lookUp(databaseUrl: string, sql: string): Promise<string> {
	const client = createClient({ url: databaseUrl });
	try {
		const { rows } = await client.execute(sql);
		const [first] = Object.values(rows[0] ?? {});
		return first === undefined || first === null ? '' : String(first);
	} finally {
		client.close();
	}
}
