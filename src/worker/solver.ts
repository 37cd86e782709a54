/** Entry of a solver thread: one task in, one answer out. It never opens the database. */
export { runTask as default } from './task';
