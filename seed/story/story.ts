import type { GroupContext } from '../../src/lib/server/context';
import type { Person } from '../people';
import type { StoryClock } from './story-clock';

/** Who acts in the demo's past, on which claims (numbers by the seed's keys), and when. */
export interface Story {
	readonly people: Readonly<Record<Person['key'], GroupContext>>;
	readonly numbers: ReadonlyMap<string, number>;
	readonly clock: StoryClock;
}
