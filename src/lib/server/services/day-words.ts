const MONTHS = [
	'January',
	'February',
	'March',
	'April',
	'May',
	'June',
	'July',
	'August',
	'September',
	'October',
	'November',
	'December'
];

/**
 * A moment's day in words for running text, in UTC as all days of the record are: "today",
 * "yesterday", "28 November", with the year when it is another one.
 * @param iso ISO 8601 moment or `YYYY-MM-DD`.
 */
export function dayWords(iso: string, now: Date): string {
	const day = iso.slice(0, 10);
	const today = now.toISOString().slice(0, 10);
	if (day === today) return 'today';
	if (Date.parse(today) - Date.parse(day) === 86_400_000) return 'yesterday';
	const [year, month, date] = day.split('-').map(Number);
	const words = `${date} ${MONTHS[month - 1]}`;
	return year === now.getUTCFullYear() ? words : `${words} ${year}`;
}
