import { describe, expect, it } from 'vitest';
import { COMMON_PASSWORDS } from './common-passwords';
import { passwordFault } from './password-rules';

describe('passwords', () => {
	it('ships several hundred common ones, all in lower case and of eight characters or more', () => {
		expect(COMMON_PASSWORDS.size).toBeGreaterThan(500);
		for (const entry of COMMON_PASSWORDS) {
			expect(entry).toBe(entry.toLowerCase());
			expect(entry.length).toBeGreaterThanOrEqual(8);
		}
	});

	it.each(['short', 'elevenchars', ''])('refuses %j as too short', (password) => {
		expect(passwordFault(password)).toMatch(/at least 12/);
	});

	it('counts characters, not code units', () => {
		expect(passwordFault('🎹🎻🎺🎷🥁🎸')).toMatch(/at least 12/);
	});

	it('refuses what bcrypt would cut', () => {
		expect(passwordFault('correct lantern meadow '.repeat(4))).toMatch(/at most 72/);
		expect(passwordFault('ü1ö2ä3ß4é5è6'.repeat(5))).toMatch(/at most 72/);
	});

	it.each([
		'password1234',
		'Password1234!',
		'P@ssw0rd12345',
		'sunshine2024!!',
		'CorrectHorseBatteryStaple',
		'iloveyouforever',
		'--Welcome--2025',
		'qwerty1234567',
		'harrypotter99'
	])('refuses the common %j', (password) => {
		expect(passwordFault(password)).toMatch(/tried first/);
	});

	it.each([
		'aaaaaaaaaaaa',
		'abcabcabcabc',
		'123456789012',
		'qwertyuiopas',
		'lkjhgfdsapoi',
		'abababababab',
		'lantern-lantern',
		'Passw0rd!Passw0rd!'
	])('refuses the pattern %j', (password) => {
		expect(passwordFault(password)).toMatch(/pattern/);
	});

	it('refuses the person’s own name and address', () => {
		const owner = { name: 'Theodora Lindqvist', email: 'theodora@example.org' };
		expect(passwordFault('theodora-lindqvist', owner)).toMatch(/own name/);
		expect(passwordFault('Lindqvist-1987', owner)).toMatch(/own name/);
		expect(passwordFault('theodora@example.org', owner)).toMatch(/own name/);
	});

	it.each([
		'lantern meadow quartz',
		'tern-over-grey-water',
		'Zq8!vLw2#pTn',
		'Gewitterwolke über Moos'
	])('takes %j', (password) => {
		expect(
			passwordFault(password, { name: 'Theodora Lindqvist', email: 't@example.org' })
		).toBeNull();
	});
});
