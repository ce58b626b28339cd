import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { CaptureRing } from './capture-ring';

const ramp = (from: number, n: number) => Float32Array.from({ length: n }, (_, i) => from + i);

describe('CaptureRing', () => {
	it('hands out every frame once and in order, whatever the quantum', () => {
		fc.assert(
			fc.property(fc.array(fc.integer({ min: 0, max: 64 }), { maxLength: 60 }), (quanta) => {
				const ring = new CaptureRing(64, 3);
				const out: number[] = [];
				let sent = 0;
				for (const n of quanta) {
					const block = ring.write(ramp(sent, n));
					sent += n;
					if (block) {
						out.push(...block);
						ring.giveBack(block);
					}
				}
				expect(ring.droppedFrames).toBe(0);
				expect(out.length).toBe(Math.floor(sent / 64) * 64);
				expect(out.every((x, i) => x === i)).toBe(true);
			})
		);
	});

	it('uses the same blocks again and makes no new ones', () => {
		const ring = new CaptureRing(128, 2);
		const seen = new Set<Float32Array>();
		for (let i = 0; i < 50; i++) {
			const block = ring.write(new Float32Array(128));
			if (block === null) throw new Error('expected a block');
			seen.add(block);
			ring.giveBack(block);
		}
		expect(seen.size).toBe(2);
	});

	it('drops and counts frames while no block is empty, and goes on whole afterwards', () => {
		const ring = new CaptureRing(128, 2);
		const first = ring.write(ramp(0, 128));
		const second = ring.write(ramp(128, 128));
		expect(ring.write(ramp(256, 128))).toBeNull();
		expect(ring.write(ramp(384, 100))).toBeNull();
		expect(ring.droppedFrames).toBe(228);
		expect(second?.[0]).toBe(128);
		if (first) ring.giveBack(first);
		const third = ring.write(ramp(484, 128));
		expect(third?.[0]).toBe(484);
		expect(ring.droppedFrames).toBe(228);
	});

	it('takes back no block of another size and no more than there are', () => {
		const ring = new CaptureRing(128, 2);
		ring.giveBack(new Float32Array(64));
		ring.giveBack(new Float32Array(128));
		ring.giveBack(new Float32Array(128));
		expect(ring.write(new Float32Array(128))).not.toBeNull();
		expect(ring.write(new Float32Array(128))).not.toBeNull();
		// two made, one given back while one was out: the third is the last
		expect(ring.write(new Float32Array(128))).not.toBeNull();
		expect(ring.write(new Float32Array(128))).toBeNull();
	});
});
