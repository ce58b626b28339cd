/**
 * Gathers the audio thread's short quanta into larger blocks without allocating. A fixed set of
 * blocks travels: filled ones are handed out (and transferred to the page), empty ones come back.
 * When all are out because the page is busy, frames are dropped and counted, never overwritten.
 */
export class CaptureRing {
	/** Frames lost so far because no empty block was at hand. */
	droppedFrames = 0;

	private readonly empty: Float32Array<ArrayBuffer>[] = [];
	private emptyCount = 0;
	private current: Float32Array<ArrayBuffer> | null;
	private filled = 0;

	/**
	 * @param blockFrames frames a block holds; at least as many as one quantum
	 * @param blockCount blocks that exist, at least 2
	 */
	constructor(
		private readonly blockFrames: number,
		blockCount: number
	) {
		for (let i = 0; i < blockCount; i++) this.empty.push(new Float32Array(blockFrames));
		this.emptyCount = blockCount;
		this.current = this.takeEmpty();
	}

	/**
	 * Adds a quantum of at most `blockFrames` frames.
	 * @returns the block that it filled, to be handed over whole, or null
	 */
	write(quantum: Float32Array): Float32Array<ArrayBuffer> | null {
		let full: Float32Array<ArrayBuffer> | null = null;
		this.current ??= this.takeEmpty();
		for (let i = 0; i < quantum.length; i++) {
			if (this.current === null) {
				this.droppedFrames += quantum.length - i;
				break;
			}
			this.current[this.filled++] = quantum[i];
			if (this.filled === this.blockFrames) {
				full = this.current;
				this.current = this.takeEmpty();
				this.filled = 0;
			}
		}
		return full;
	}

	/** Takes an emptied block back. One of another size is ignored. */
	giveBack(block: Float32Array<ArrayBuffer>): void {
		if (block.length !== this.blockFrames || this.emptyCount === this.empty.length) return;
		this.empty[this.emptyCount++] = block;
	}

	private takeEmpty(): Float32Array<ArrayBuffer> | null {
		return this.emptyCount === 0 ? null : this.empty[--this.emptyCount];
	}
}
