const FORMAT = new Intl.DateTimeFormat('en-GB', {
	dateStyle: 'medium',
	timeStyle: 'short',
	timeZone: 'UTC'
});

/** A moment as admins compare it with a log: day and time, UTC, said so. */
export function momentWords(at: Date | string): string {
	return `${FORMAT.format(new Date(at))} UTC`;
}
