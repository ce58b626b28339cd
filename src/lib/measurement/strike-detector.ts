/**
 * Finds a strike: a jump of the level over everything heard just before. A beating tone never rises
 * like that, because its level a third of a second ago is still in view when it swells.
 */
const FRAME_SECONDS = 0.01;
/** The level before a strike is the loudest frame between these ages. */
const BEFORE_SECONDS: readonly [number, number] = [0.03, 0.33];
const JUMP_DB = 10;
const ABOVE_FLOOR_DB = 15;
/** Below this nothing is a strike, however silent the room; a microphone's last bit is near −90. */
const LEAST_LEVEL_DB = -60;
/** Nothing is believed until the noise floor has been heard this long. */
const SETTLE_SECONDS = 0.4;
/** One strike is not found twice: its attack climbs for some hundredths of a second. */
const HOLD_SECONDS = 0.15;
const LOOK_AWAY_SECONDS = 0.1;

/** Level of a root mean square in dB re full scale; −120 for silence. */
export function levelDb(meanSquare: number): number {
	return meanSquare > 1e-12 ? 10 * Math.log10(meanSquare) : -120;
}

/** Level of one version of the signal, frame by frame, with its quiet floor. */
class LevelTrack {
	/** 20th percentile of the frames heard while learning, in dB re full scale. */
	floorDb = -120;
	private readonly recent: number[] = [];
	private readonly quiet: number[] = [];

	/** True when a frame of this level stands out over the room and over what was just heard. */
	jumpsTo(level: number): boolean {
		if (level < LEAST_LEVEL_DB || level < this.floorDb + ABOVE_FLOOR_DB) return false;
		const end = this.recent.length - Math.round(BEFORE_SECONDS[0] / FRAME_SECONDS);
		for (let i = 0; i < end; i++) if (level < this.recent[i] + JUMP_DB) return false;
		return true;
	}

	/** @param learning whether the frame belongs to the room, before any strike */
	remember(level: number, learning: boolean): void {
		this.recent.push(level);
		if (this.recent.length > Math.round(BEFORE_SECONDS[1] / FRAME_SECONDS)) this.recent.shift();
		if (!learning) return;
		this.quiet.push(level);
		if (this.quiet.length > 200) this.quiet.shift();
		const sorted = [...this.quiet].sort((a, b) => a - b);
		this.floorDb = sorted[Math.floor(sorted.length / 5)];
	}
}

/**
 * Watches the level as it is, and the level of the second difference, in which the upper partials
 * stand out: they die within a second, so a new blow on a string that still rings shows there.
 */
export class StrikeDetector {
	private readonly frameLength: number;
	private readonly plain = new LevelTrack();
	private readonly bright = new LevelTrack();
	private plainSum = 0;
	private brightSum = 0;
	private previous = 0;
	private beforePrevious = 0;
	private inFrame = 0;
	private frames = 0;
	private holdUntil = 0;
	private struck = false;

	constructor(sampleRateHz: number) {
		this.frameLength = Math.max(1, Math.round(sampleRateHz * FRAME_SECONDS));
	}

	/** Level of the room in dB re full scale. */
	get floorDb(): number {
		return this.plain.floorDb;
	}

	/** Takes nothing for a strike in the next tenth of a second: the edges of a hole click. */
	lookAway(): void {
		this.holdUntil = this.frames + Math.round(LOOK_AWAY_SECONDS / FRAME_SECONDS);
	}

	/**
	 * Adds samples.
	 * @param onStrike called with the index of the first sample of the strike's frame, counted from
	 *   the first sample ever added
	 */
	add(samples: Float32Array, onStrike: (sampleIndex: number) => void): void {
		for (let i = 0; i < samples.length; i++) {
			const x = samples[i];
			const bend = x - 2 * this.previous + this.beforePrevious;
			this.beforePrevious = this.previous;
			this.previous = x;
			this.plainSum += x * x;
			this.brightSum += bend * bend;
			if (++this.inFrame === this.frameLength) this.endFrame(onStrike);
		}
	}

	private endFrame(onStrike: (sampleIndex: number) => void): void {
		const plainDb = levelDb(this.plainSum / this.frameLength);
		const brightDb = levelDb(this.brightSum / this.frameLength);
		this.plainSum = 0;
		this.brightSum = 0;
		this.inFrame = 0;
		const ready = this.frames * FRAME_SECONDS >= SETTLE_SECONDS && this.frames >= this.holdUntil;
		if (ready && (this.plain.jumpsTo(plainDb) || this.bright.jumpsTo(brightDb))) {
			this.holdUntil = this.frames + Math.round(HOLD_SECONDS / FRAME_SECONDS);
			this.struck = true;
			onStrike(this.frames * this.frameLength);
		}
		const learning = !this.struck;
		this.plain.remember(plainDb, learning);
		this.bright.remember(brightDb, learning);
		this.frames++;
	}
}
