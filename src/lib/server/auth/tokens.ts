import { createHash, createHmac, randomBytes, timingSafeEqual } from 'node:crypto';
import { env } from '../env';

const TOKEN = /^[A-Za-z0-9_-]{43}$/;
const JOIN = /^([A-Za-z0-9_-]{22})\.([A-Za-z0-9_-]{22})$/;

/** A secret of 256 bits for a link in a mail, and the hash under which it is stored. */
export function newToken(): { token: string; hash: string } {
	const token = randomBytes(32).toString('base64url');
	return { token, hash: sha256(token) };
}

/** The stored form of a token that somebody brought, or null when it cannot be one. */
export function hashOfToken(token: string): string | null {
	return TOKEN.test(token) ? sha256(token) : null;
}

const sha256 = (text: string) => createHash('sha256').update(text).digest('hex');

function joinProof(classId: string, version: number): Buffer {
	const key = createHmac('sha256', env().AUTH_SECRET).update('join link, first form').digest();
	return createHmac('sha256', key).update(`${classId}:${version}`).digest().subarray(0, 16);
}

/** The token of a class's join link: derived, never stored; another version makes another token. */
export function joinToken(classId: string, version: number): string {
	const id = Buffer.from(classId.replaceAll('-', ''), 'hex').toString('base64url');
	return `${id}.${joinProof(classId, version).toString('base64url')}`;
}

/** The class that a join token speaks of, before it is proved; null when it cannot be one. */
export function classOfJoinToken(token: string): string | null {
	const parts = JOIN.exec(token);
	if (!parts) return null;
	const hex = Buffer.from(parts[1], 'base64url').toString('hex');
	return hex.replace(/^(.{8})(.{4})(.{4})(.{4})(.{12})$/, '$1-$2-$3-$4-$5');
}

/** Whether the token was derived for this version of the class's link. */
export function provesJoin(token: string, classId: string, version: number): boolean {
	const parts = JOIN.exec(token);
	if (!parts || classOfJoinToken(token) !== classId) return false;
	const brought = Buffer.from(parts[2], 'base64url');
	const wanted = joinProof(classId, version);
	return brought.length === wanted.length && timingSafeEqual(brought, wanted);
}
