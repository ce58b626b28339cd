import { describe, expect, it } from 'vitest';
import {
	KeptRecords,
	sendRecord,
	type KeptStore,
	type SendOutcome,
	type StringCheckRecord
} from './record';

function memory(): KeptStore & { map: Map<string, string> } {
	const map = new Map<string, string>();
	return {
		map,
		getItem: (key) => map.get(key) ?? null,
		setItem: (key, value) => void map.set(key, value),
		removeItem: (key) => void map.delete(key)
	};
}

const record = (id: string): StringCheckRecord => ({
	id,
	kind: 'note',
	notes: ['A3'],
	source: 'file',
	result: { notes: [], pairs: [], advice: [] },
	device: {
		sampleRateHz: 48_000,
		echoCancellation: null,
		noiseSuppression: null,
		autoGainControl: null,
		userAgentClass: 'desktop-chromium'
	},
	checkedAt: '2025-01-01T00:00:00.000Z'
});

describe('sendRecord', () => {
	it.each([
		[201, 'stored'],
		[200, 'stored'],
		[401, 'later'],
		[429, 'later'],
		[500, 'later'],
		[400, 'refused'],
		[409, 'refused'],
		[413, 'refused']
	] as const)('%i is %s', async (status, outcome) => {
		const send = (async () => new Response(null, { status })) as typeof fetch;
		expect(await sendRecord(record('a'), send)).toBe(outcome);
	});

	it('no network is later', async () => {
		const send = (() => Promise.reject(new TypeError('failed'))) as typeof fetch;
		expect(await sendRecord(record('a'), send)).toBe('later');
	});
});

describe('KeptRecords', () => {
	it('keeps each record once, apart for each person', () => {
		const store = memory();
		const mine = new KeptRecords('me', store);
		mine.keep(record('a'));
		mine.keep(record('b'));
		mine.keep(record('a'));
		expect(mine.all().map((r) => r.id)).toEqual(['b', 'a']);
		expect(new KeptRecords('you', store).all()).toEqual([]);
		mine.forget('a');
		mine.forget('b');
		expect(store.map.size).toBe(0);
	});

	it('sends in order, forgets what was taken or refused, stops at what must wait', async () => {
		const kept = new KeptRecords('me', memory());
		for (const id of ['a', 'b', 'c', 'd']) kept.keep(record(id));
		const outcomes: Record<string, SendOutcome> = {
			a: 'stored',
			b: 'refused',
			c: 'later',
			d: 'stored'
		};
		const sent: string[] = [];
		const left = await kept.sendAll(async ({ id }) => (sent.push(id), outcomes[id]));
		expect(sent).toEqual(['a', 'b', 'c']);
		expect(left).toBe(2);
	});

	it('says so when the browser has no room, and survives rubbish', () => {
		const full: KeptStore = {
			...memory(),
			setItem: () => {
				throw new DOMException('full', 'QuotaExceededError');
			}
		};
		expect(new KeptRecords('me', full).keep(record('a'))).toBe(false);
		const rubbish = memory();
		rubbish.map.set('ebbtone.string-checks.me', '{');
		expect(new KeptRecords('me', rubbish).all()).toEqual([]);
	});
});
