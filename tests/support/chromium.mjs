import { spawnSync } from 'node:child_process';
import { existsSync } from 'node:fs';
import { delimiter, join } from 'node:path';

const NAMES = ['chromium', 'chromium-browser', 'google-chrome-stable', 'google-chrome'];

/** The browser the end-to-end tests drive: CHROMIUM, else the first one on the path. */
export function findChromium() {
	if (process.env.CHROMIUM) return process.env.CHROMIUM;
	const folders = (process.env.PATH ?? '').split(delimiter);
	const paths = NAMES.flatMap((name) => folders.map((folder) => join(folder, name)));
	return paths.find((path) => existsSync(path)) ?? null;
}

/**
 * Makes sure that there is one: as root on Debian it is installed, elsewhere the answer says what
 * to install.
 * @returns {string | null} what is wrong
 */
export function ensureChromium() {
	if (findChromium()) return null;
	const root = process.getuid?.() === 0;
	const apt = spawnSync('apt-get', ['--version']).status === 0;
	if (root && apt) {
		console.log("Chromium is missing: installing Debian's package for the end-to-end tests.");
		const env = { ...process.env, DEBIAN_FRONTEND: 'noninteractive' };
		spawnSync('apt-get', ['update', '-qq'], { stdio: 'inherit', env });
		spawnSync('apt-get', ['install', '-y', '-qq', 'chromium'], { stdio: 'inherit', env });
		if (findChromium()) return null;
	}
	return (
		'Chromium is missing. Install it (on Debian: apt-get install chromium), or set ' +
		'CHROMIUM to the path of a Chromium or Chrome; then run npm test again.'
	);
}
