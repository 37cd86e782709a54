import { spawn } from 'node:child_process';

/**
 * Runs a command with its output on ours; Ctrl+C reaches it too. Settings of whoever runs the
 * tests don't reach them.
 * @param {string[]} command
 * @param {Record<string, string>} [env]
 * @returns {Promise<number>} its exit code
 */
export function run([program = '', ...args], env = {}) {
	const own = Object.entries(process.env).filter(
		([name]) => !/^(MERESTONE_(?!CHROMIUM$)|SMTP_URL$|DATABASE_URL$|ORIGIN$|PORT$)/.test(name)
	);
	return new Promise((resolve) => {
		const child = spawn(program, args, {
			stdio: 'inherit',
			env: { ...Object.fromEntries(own), ...env },
			shell: process.platform === 'win32'
		});
		child.on('error', (error) => {
			console.error(error.message);
			resolve(1);
		});
		child.on('exit', (code) => resolve(code ?? 1));
	});
}
