export { handle, handleError, init } from '$lib/server/hooks';
