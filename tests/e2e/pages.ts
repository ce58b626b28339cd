/** Every page of the application, by who may open it. */
import type { Page } from '@playwright/test';
import { ADMIN, student, TEACHER, type Person } from './support';

export interface Place {
	name: string;
	path: string;
}

export interface Tour {
	role: string;
	who: Person | null;
	/** Asks the application for what the addresses need. */
	places: (page: Page) => Promise<Place[]>;
}

const place = (path: string): Place => ({
	name: path === '/' ? 'first' : path.slice(1).replaceAll(/[/?=]/g, '-'),
	path
});

async function newestAttempt(page: Page): Promise<string> {
	const list = (await (await page.request.get('/api/attempts')).json()) as {
		attempts: { id: string }[];
	};
	return list.attempts[0].id;
}

const PRACTICE = ['/today', '/practice', '/practice/unison', '/practice/interval', '/string-check'];

export const TOURS: readonly Tour[] = [
	{
		role: 'stranger',
		who: null,
		places: async () =>
			['/', '/try', '/cautions', '/sign-in', '/forgot', '/join/none', '/invitation/none']
				.concat('/reset/none', '/nowhere')
				.map(place)
	},
	{
		role: 'student',
		who: student('jory'),
		places: async (page) => [
			...[...PRACTICE, '/progress', '/account', '/sign-out'].map(place),
			{ name: 'attempt', path: `/practice/attempts/${await newestAttempt(page)}` }
		]
	},
	{
		role: 'instructor',
		who: TEACHER,
		places: async (page) => {
			await page.goto('/classes');
			await page.getByRole('link', { name: 'Open Evening class, first term' }).click();
			const pupil =
				(await page.getByRole('link', { name: student('jory').name }).getAttribute('href')) ?? '';
			await page.goto(pupil);
			const attempt =
				(await page.locator('a[href*="/attempts/"]').first().getAttribute('href')) ?? '';
			return [
				place('/classes'),
				{ name: 'class', path: pupil.split('/students/')[0] },
				{ name: 'class-student', path: pupil },
				{ name: 'class-attempt', path: attempt },
				place('/today')
			];
		}
	},
	{
		role: 'admin',
		who: ADMIN,
		places: async () => ['/admin/users', '/admin/mail', '/admin/audit'].map(place)
	}
];

/** Keeps a picture to look at, when EBBTONE_E2E_SHOTS names a folder. */
export async function shot(page: Page, name: string): Promise<void> {
	const folder = process.env.EBBTONE_E2E_SHOTS;
	if (folder) await page.screenshot({ path: `${folder}/${name}.png`, fullPage: true });
}
