import { defineConfig } from '@playwright/test';

/** Against the production build; each test file starts its own server on a free port. */
export default defineConfig({
	testDir: 'tests/e2e',
	timeout: 180_000,
	expect: { timeout: 15_000 },
	workers: 1,
	forbidOnly: true,
	reporter: [['list'], ['json', { outputFile: 'test-results/e2e.json' }]],
	use: {
		browserName: 'chromium',
		launchOptions: {
			executablePath: process.env.CHROMIUM ?? '/usr/bin/chromium',
			args: [
				'--no-sandbox',
				'--disable-gpu',
				'--disable-quic',
				'--no-first-run',
				'--disable-background-networking',
				'--disable-component-update',
				'--disable-sync'
			]
		},
		trace: 'off',
		screenshot: 'only-on-failure'
	}
});
