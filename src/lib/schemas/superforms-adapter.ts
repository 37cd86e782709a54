// vite.config.ts points `sveltekit-superforms/adapters` here: its own entry pulls in every schema library.
export {
	zod as zod4,
	zodClient as zod4Client
} from '../../../node_modules/sveltekit-superforms/dist/adapters/zod4.js';
