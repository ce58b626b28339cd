import fc from 'fast-check';
import { beforeAll, describe, expect, it } from 'vitest';
import { createRandom } from '../acoustics/random';
import { isReachable, positionAfter, stepsFromStart } from './grid';
import { LEARNER_PROFILES, personAfter, simulateAttempt } from './simulation/learner';
import { checkSubmission } from './submission';
import { GRID_CENTS, RANGE_CENTS, type AttemptSubmission, type ScoredDrillId } from './types';

type Loose = Record<string, unknown>;

const good = new Map<ScoredDrillId, AttemptSubmission>();

beforeAll(() => {
	for (const drill of ['unison', 'interval'] as const) {
		good.set(
			drill,
			simulateAttempt(createRandom(77), {
				drill,
				startedMs: Date.UTC(2026, 2, 10, 12),
				person: personAfter(LEARNER_PROFILES.steady, 5),
				device: {
					sampleRateHz: 48_000,
					outputLatencySeconds: null,
					userAgentClass: 'desktop-gecko'
				},
				toleranceSet: 'learning'
			})
		);
	}
});

/** A copy as it would arrive, to be tampered with. */
function copy(drill: ScoredDrillId = 'unison') {
	return JSON.parse(JSON.stringify(good.get(drill))) as {
		stimulus: Loose & { trials: Loose[]; options: Loose };
		trials: (Loose & { trace: [number, string, number][]; committedCents: number })[];
		device: Loose;
	} & Loose;
}

function reasonFor(value: unknown): string {
	const check = checkSubmission(value);
	if (check.ok) throw new Error('was taken');
	expect(check.reason).toMatch(/^[A-Z].*\.$/);
	return check.reason;
}

describe('an honest attempt', () => {
	it('is taken, with the score of its raw trials', () => {
		for (const drill of ['unison', 'interval'] as const) {
			const check = checkSubmission(copy(drill));
			expect(check).toMatchObject({ ok: true, result: { drill, count: 10 } });
			if (check.ok) expect(check.result.score).toBe(good.get(drill)?.clientScore);
		}
	});

	it('is taken whatever score the client claims: that is for the server to flag', () => {
		expect(checkSubmission({ ...copy(), clientScore: 0 }).ok).toBe(true);
	});

	it('is taken with its fields in another order, as a database may give them back', () => {
		const value = copy('interval');
		const turned = (inner: unknown): unknown =>
			Array.isArray(inner)
				? inner.map(turned)
				: inner !== null && typeof inner === 'object'
					? Object.fromEntries(
							Object.entries(inner)
								.reverse()
								.map(([k, v]) => [k, turned(v)])
						)
					: inner;
		expect(checkSubmission(turned(value)).ok).toBe(true);
	});
});

describe('a malformed attempt', () => {
	it('is refused, whatever it is', () => {
		fc.assert(
			fc.property(fc.jsonValue(), (value) => {
				expect(checkSubmission(value).ok).toBe(false);
			})
		);
	});

	it('is refused when any field is missing, of another kind, or added', () => {
		for (const key of Object.keys(copy())) {
			const without = copy();
			delete without[key];
			reasonFor(without);
			reasonFor({ ...copy(), [key]: {} });
		}
		reasonFor({ ...copy(), studentId: 'somebody' });
		expect(reasonFor({ ...copy(), id: 'no-uuid' })).toBe('The attempt is malformed at id.');
	});

	it('never throws on a mutated attempt', () => {
		const strange = fc.oneof(
			fc.jsonValue(),
			fc.constantFrom(Number.NaN, Number.POSITIVE_INFINITY, -0, 1e308)
		);
		fc.assert(
			fc.property(
				fc.constantFrom('trials', 'stimulus', 'device', 'seed'),
				strange,
				(key, value) => {
					expect(checkSubmission({ ...copy(), [key]: value }).ok).toBe(false);
				}
			)
		);
	});
});

describe('an impossible attempt', () => {
	it('is refused when its stimulus is not what its seed draws', () => {
		fc.assert(
			fc.property(
				fc.nat({ max: 9 }),
				fc.constantFrom('midi', 'velocityPercent', 'startCents'),
				(i, key) => {
					const value = copy();
					value.stimulus.trials[i][key] = (value.stimulus.trials[i][key] as number) + 1;
					const reason = reasonFor(value);
					expect(reason).toMatch(/not what its seed draws|malformed/);
				}
			)
		);
		const easier = copy();
		easier.stimulus.trials[0].toleranceSet = 'concert';
		expect(reasonFor(easier)).toBe('The stimulus is not what its seed draws.');
	});

	it('is refused under another seed, drill or engine version', () => {
		const other = copy();
		other.seed = 1;
		expect(reasonFor(other)).toContain('name different');
		const both = copy();
		both.seed = 1;
		both.stimulus.seed = 1;
		expect(reasonFor(both)).toBe('The stimulus is not what its seed draws.');
		const future = copy();
		future.engineVersion = 99;
		future.stimulus.engineVersion = 99;
		expect(reasonFor(future)).toBe('Engine version 99 is not known here.');
	});

	it('is refused when the commit is not where the string was left', () => {
		fc.assert(
			fc.property(fc.nat({ max: 9 }), fc.integer({ min: -200, max: 200 }), (i, steps) => {
				fc.pre(steps !== 0);
				const value = copy();
				const trial = value.trials[i];
				trial.committedCents = Math.round((trial.committedCents + steps * GRID_CENTS) * 100) / 100;
				reasonFor(value);
			})
		);
		const zero = copy();
		zero.trials[3].committedCents = 0;
		zero.trials[3].trace[zero.trials[3].trace.length - 1][2] = 0;
		reasonFor(zero);
	});

	it('is refused off the grid, backwards in time, jumping, or without a strike', () => {
		const offGrid = copy();
		const move = offGrid.trials[0].trace.findIndex(([, kind]) => kind === 'move');
		for (const event of offGrid.trials[0].trace.slice(move))
			event[2] = Math.round((event[2] + 0.02) * 100) / 100;
		offGrid.trials[0].committedCents =
			Math.round((offGrid.trials[0].committedCents + 0.02) * 100) / 100;
		expect(reasonFor(offGrid)).toBe('Trial 1: the string stands where no move can put it.');

		const backwards = copy();
		backwards.trials[1].trace[1][0] = 0;
		backwards.trials[1].trace[0][0] = 50;
		expect(reasonFor(backwards)).toBe('Trial 2: time runs backwards in the trace.');

		const silent = copy();
		silent.trials[2].trace = silent.trials[2].trace.filter(([, kind]) => kind !== 'strike');
		expect(reasonFor(silent)).toBe('Trial 3 was committed without one strike.');

		const unmoved = copy();
		unmoved.trials[4].trace = unmoved.trials[4].trace.map(([t, kind, cents]) => [
			t,
			kind === 'move' ? 'strike' : kind,
			cents
		]);
		expect(reasonFor(unmoved)).toBe('Trial 5: the string moved without a move.');

		const early = copy();
		early.trials[5].committedAtMs = 1;
		expect(reasonFor(early)).toBe('Trial 6 was committed before its last event.');
	});

	it('is refused with a check note in a unison', () => {
		const value = copy();
		const [first] = value.trials[0].trace;
		value.trials[0].trace.unshift([
			first[0],
			'check',
			value.stimulus.trials[0].startCents as number
		]);
		expect(reasonFor(value)).toBe('Trial 1: a unison has no check note.');
	});

	it('is refused when its trials do not fit between its ends', () => {
		const value = copy();
		value.finishedAt = value.startedAt;
		expect(reasonFor(value)).toBe('The trials last longer than the attempt.');
		value.finishedAt = '2020-01-01T00:00:00.000Z';
		expect(reasonFor(value)).toBe('The attempt finished before it started.');
	});
});

describe('the grid', () => {
	it('reaches every whole step inside the range, exactly, and nothing else', () => {
		fc.assert(
			fc.property(
				fc.integer({ min: -2000, max: 2000 }),
				fc.integer({ min: -5000, max: 5000 }),
				(hundredth, steps) => {
					const start = hundredth / 100;
					const position = positionAfter(start, steps);
					expect(Math.abs(position)).toBeLessThanOrEqual(RANGE_CENTS);
					expect(isReachable(start, position)).toBe(true);
					expect(positionAfter(start, stepsFromStart(start, position))).toBe(position);
					expect(isReachable(start, Math.round((position + 0.01) * 100) / 100)).toBe(false);
					expect(Object.is(position, -0)).toBe(false);
				}
			)
		);
	});
});
