import { describe, expect, it } from 'vitest';
import { FrozenClockError, waitForClock } from './engine-clock';
import { VoiceSlots } from './voice-slots';

describe('the clock check', () => {
	it('is content as soon as the clock advances', async () => {
		let waits = 0;
		const clock = () => (waits < 3 ? 1.5 : 1.6);
		await waitForClock(clock, async () => void (waits += 1));
		expect(waits).toBe(3);
	});

	it('rejects a clock that stands still, with a sentence', async () => {
		let waits = 0;
		const check = waitForClock(
			() => 7,
			async () => void (waits += 1),
			200
		);
		await expect(check).rejects.toThrow(FrozenClockError);
		await expect(check).rejects.toThrow(/stands still/);
		expect(waits).toBe(10);
	});
});

describe('voices of the bank', () => {
	it('keep their place, take free ones, and give away the one longest unused', () => {
		const slots = new VoiceSlots(3);
		expect(slots.find('a')).toBe(-1);
		expect(['a', 'b', 'c'].map((name) => slots.take(name))).toEqual([0, 1, 2]);
		expect(slots.take('a')).toBe(0);
		expect(slots.take('d')).toBe(1);
		expect(slots.find('b')).toBe(-1);
		expect(slots.find('d')).toBe(1);
	});
});
