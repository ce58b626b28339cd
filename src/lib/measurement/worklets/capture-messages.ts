/** Name under which the capture processor is registered. */
export const CAPTURE_PROCESSOR = 'ebbtone-capture';

/** 1024 frames are 21 ms at 48 kHz: soon enough to say "heard", few enough messages. */
export const BLOCK_FRAMES = 1024;

/** 64 blocks let the page be busy for 1.3 s at 48 kHz before a frame is lost. */
export const BLOCK_COUNT = 64;

/** What the audio thread sends for each filled block. */
export interface CaptureMessage {
	/** Transferred; goes back to the audio thread after it has been copied. */
	block: Float32Array<ArrayBuffer> | null;
	/** Frames lost since the start. */
	droppedFrames: number;
}
