import { sql, type Column, type SQL } from 'drizzle-orm';
import { inequalities } from '../db/schema';

const LONGEST_SEARCH = 200;
const MOST_WORDS = 10;

/** What is searched for: every word must occur. */
export function searchWords(text: string): readonly string[] {
	return text.slice(0, LONGEST_SEARCH).split(/\s+/).filter(Boolean).slice(0, MOST_WORDS);
}

/** Whether a text holds a word, in any case; `%` and `_` stand for themselves. */
export function contains(text: SQL | Column, word: string): SQL {
	return sql`${text} like ${`%${word.replace(/[\\%_]/g, '\\$&')}%`} escape '\\'`;
}

/** What an inequality is found by. */
export const INEQUALITY_TEXT = sql`coalesce(${inequalities.name}, '') || ' ' || ${inequalities.scenario} || ' ' || ${inequalities.latex}`;
