export { handle, handleError, init } from '$lib/server/kit/hooks';
