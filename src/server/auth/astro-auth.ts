import { AUTH_PATH } from './auth-config';

/**
 * What auth-astro finds at `auth:config`. It is read before there are settings or a database, so it holds the path
 * alone; the endpoint gives the rest with each request.
 */
export default { prefix: AUTH_PATH, basePath: AUTH_PATH, providers: [] };
