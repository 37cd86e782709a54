/**
 * `npm run demo [-- --fresh]`: builds when something changed, seeds an embedded database once,
 * then runs the production server with a local mail sink. Nothing of it leaves this machine.
 */
import { spawn, spawnSync } from 'node:child_process';
import { existsSync, readdirSync, readFileSync, rmSync, statSync } from 'node:fs';
import { createServer } from 'node:net';
import { join } from 'node:path';
import { DEMO_PASSWORD, GROUP, PEOPLE } from './people';

const FOLDER = 'data/demo';
const DATABASE = `${FOLDER}/merestone.db`;
/** Made when the seed is done; holds the account id of the demo's administrator. */
const SEEDED = `${FOLDER}/seeded`;
/** What the build is made of. */
const SOURCES = ['src', 'static', 'svelte.config.js', 'vite.config.ts', 'package-lock.json'];

const node = process.execPath;
const port = Number(process.env.PORT ?? 3000);
const origin = process.env.ORIGIN ?? `http://localhost:${port}`;
const environment = {
	...process.env,
	PORT: String(port),
	ORIGIN: origin,
	DATABASE_URL: `file:${DATABASE}`,
	// The demo's accounts and its mail are open to whoever reaches it.
	HOST: process.env.HOST ?? '127.0.0.1',
	MERESTONE_DEMO: '1',
	MERESTONE_LOG: process.env.MERESTONE_LOG ?? 'warn'
};

function newest(path: string): number {
	const stat = statSync(path);
	if (!stat.isDirectory()) return stat.mtimeMs;
	return Math.max(0, ...readdirSync(path).map((name) => newest(join(path, name))));
}

/** Runs a step; a quiet one shows what it printed only when it fails. */
function run(what: string, args: readonly string[], quiet: boolean): void {
	console.log(what);
	const output = quiet ? 'pipe' : 'inherit';
	const done = spawnSync(node, args, { stdio: ['ignore', output, output], env: environment });
	if (done.status !== 0) {
		if (quiet) console.error(String(done.stdout), String(done.stderr));
		console.error(`That failed (node ${args.join(' ')}).`);
		process.exit(done.status ?? 1);
	}
}

async function portIsFree(): Promise<boolean> {
	return new Promise((resolve) => {
		const probe = createServer();
		probe.once('error', () => resolve(false));
		probe.listen(port, () => probe.close(() => resolve(true)));
	});
}

if (!Number.isInteger(port) || port < 1 || port > 65_535) {
	console.error(`PORT is ${process.env.PORT}, but expected a port number from 1 to 65535.`);
	process.exit(2);
}
if (!(await portIsFree())) {
	console.error(
		`Port ${port} is taken. Stop what uses it, or choose another: PORT=3001 npm run demo`
	);
	process.exit(1);
}
if (process.argv.includes('--fresh')) rmSync(FOLDER, { recursive: true, force: true });

const built = 'build/index.js';
if (!existsSync(built) || statSync(built).mtimeMs < Math.max(...SOURCES.map(newest))) {
	run('Building (about half a minute) ...', ['node_modules/vite/bin/vite.js', 'build'], true);
}
if (!existsSync(SEEDED)) {
	rmSync(FOLDER, { recursive: true, force: true });
	run(
		'Seeding: the solvers recompute the demo group’s claims (about a minute) ...',
		['node_modules/tsx/dist/cli.mjs', 'seed/seed.ts', SEEDED],
		false
	);
}

const server = spawn(node, ['build'], {
	stdio: ['ignore', 'inherit', 'inherit'],
	env: { MERESTONE_ADMINS: readFileSync(SEEDED, 'utf8').trim(), ...environment }
});
for (const signal of ['SIGINT', 'SIGTERM'] as const) process.on(signal, () => server.kill(signal));
server.on('exit', (code) => process.exit(code ?? 0));

async function answers(): Promise<boolean> {
	for (let i = 0; i < 100; i++) {
		try {
			if ((await fetch(`http://127.0.0.1:${port}/`)).ok) return true;
		} catch {
			// not listening yet
		}
		await new Promise((resolve) => setTimeout(resolve, 200));
	}
	return false;
}

if (await answers()) {
	const accounts = PEOPLE.map(({ email, role }) => `    ${email.padEnd(24)} ${role}`).join('\n');
	console.log(`
Merestone is running at ${origin}

  ${GROUP.name}: ${origin}/g/${GROUP.slug}
  Mail it sent:  ${origin}/demo/mail
  Outbox:        ${origin}/admin/mail (as the owner, who administers this site)

  Demo accounts, all with the password "${DEMO_PASSWORD}":
${accounts}

Stop it with Ctrl+C. The data stays in ${FOLDER}/; start over with: npm run demo -- --fresh
`);
} else {
	console.error('The server did not answer within 20 seconds; see its messages above.');
	server.kill('SIGTERM');
}
