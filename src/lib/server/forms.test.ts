import { describe, expect, it } from 'vitest';
import { nameField } from './forms';

describe('a name in a form', () => {
	it.each([
		['  Edda Thornquill ', 'Edda Thornquill'],
		['Évora 二胡 class', 'Évora 二胡 class'],
		['\u202eecila', 'ecila'],
		['two\r\nlines', 'two lines'],
		['a\u0000b', 'a b'],
		['🎹', '🎹'],
		['a\u200c\u200db', 'a\u200c\u200db'],
		["O'Neil <b>", "O'Neil <b>"]
	])('%j is taken as %j', (given, taken) => {
		expect(nameField.parse(given)).toBe(taken);
	});

	it.each([
		'',
		'   ',
		'\u200b\u200b',
		'\u3164\u3164',
		'\u0301',
		'\u200d',
		'\u0000',
		'x'.repeat(121)
	])('%j is refused', (given) => {
		expect(nameField.safeParse(given).success).toBe(false);
	});
});
