/** Thrown when the browser says that sound runs but its clock stands still. */
export class FrozenClockError extends Error {
	override name = 'FrozenClockError';
	constructor() {
		super('The sound clock of this browser stands still. Reload the page and try again.');
	}
}

/**
 * Waits until the clock has advanced. Some browsers leave a context "running" with a frozen clock.
 * @param readClock seconds
 * @param wait resolves after the given number of milliseconds
 * @param patienceMs how long to wait in all before giving up with {@link FrozenClockError}
 */
export async function waitForClock(
	readClock: () => number,
	wait: (ms: number) => Promise<void>,
	patienceMs = 1000
): Promise<void> {
	const start = readClock();
	for (let waited = 0; waited < patienceMs; waited += 20) {
		await wait(20);
		if (readClock() > start) return;
	}
	throw new FrozenClockError();
}
