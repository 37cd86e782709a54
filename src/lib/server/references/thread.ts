/** Entry of the thread that reads and formats references, so that the server never waits for it. */
export { parseBibtex as default } from './parse-bibtex';
