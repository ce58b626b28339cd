import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { generateBlock } from './generate';
import { LONGEST_PAUSE_MS, TraceRecorder } from './recorder';
import { traceFault } from './trace';
import { RANGE_CENTS } from './types';

const [spec] = generateBlock('interval', 12).trials;

describe('a trial being recorded', () => {
	it('is a possible trial, whatever was done', () => {
		const act = fc.oneof(
			fc.record({ steps: fc.integer({ min: -400, max: 400 }), wait: fc.nat({ max: 300 }) }),
			fc.record({
				kind: fc.constantFrom(
					'strike' as const,
					'fixed' as const,
					'moving' as const,
					'help' as const,
					'check' as const,
					'target' as const
				),
				wait: fc.nat({ max: 100_000 })
			})
		);
		fc.assert(
			fc.property(fc.array(act, { maxLength: 200 }), (acts) => {
				let now = 5000.25;
				const recorder = new TraceRecorder(spec, now);
				for (const each of acts) {
					now += each.wait + 0.4;
					if ('steps' in each) recorder.move(each.steps, now);
					else recorder.note(each.kind, now);
				}
				recorder.note('strike', now);
				const raw = recorder.commit(now + 10);
				expect(traceFault(spec, raw)).toBeNull();
				expect(raw.committedCents).toBe(recorder.cents);
			})
		);
	});

	it('merges a held key and keeps where it ended', () => {
		const recorder = new TraceRecorder(spec, 0);
		recorder.note('strike', 10);
		for (let press = 1; press <= 60; press += 1) recorder.move(1, 10 + press * 33);
		const raw = recorder.commit(3000);
		expect(raw.committedCents).toBeCloseTo(spec.startCents + 3, 10);
		expect(raw.trace.length).toBeLessThan(40);
	});

	it('stays small however long somebody turns', () => {
		const recorder = new TraceRecorder(spec, 0);
		recorder.note('strike', 1);
		for (let press = 0; press < 20_000; press += 1) recorder.move(press % 2 ? 1 : -1, press * 100);
		const raw = recorder.commit(2_000_000);
		expect(raw.trace.length).toBeLessThanOrEqual(1201);
		expect(traceFault(spec, raw)).toBeNull();
	});

	it('stops at the end of the range and says so', () => {
		const recorder = new TraceRecorder(spec, 0);
		expect(recorder.move(5000, 100)).toBe(true);
		expect(recorder.cents).toBeLessThanOrEqual(RANGE_CENTS);
		expect(recorder.move(1, 200)).toBe(false);
		expect(recorder.move(-1, 300)).toBe(true);
	});

	it('does not count a page left open as practice', () => {
		const recorder = new TraceRecorder(spec, 0);
		recorder.note('strike', 1000);
		const raw = recorder.commit(10 * 3_600_000);
		expect(raw.committedAtMs).toBe(1000 + LONGEST_PAUSE_MS);
	});
});
