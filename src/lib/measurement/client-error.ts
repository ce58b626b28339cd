/** Thrown when a measurement does not come back; the message is for the person. */
export class AnalysisFailedError extends Error {
	constructor(message = 'The measurement broke off. Try once more; the sound itself may be fine.') {
		super(message);
		this.name = 'AnalysisFailedError';
	}
}
