import { configSchema } from '../server/environment';

/** Our environment without any setting of the studio, so that tests and checks never meet somebody's real services. */
export function cleanEnvironment(): NodeJS.ProcessEnv {
  const ours = new Set(Object.keys(configSchema.shape));
  const kept = Object.entries(process.env).filter(([name]) => !ours.has(name));
  return { ...Object.fromEntries(kept), ASTRO_TELEMETRY_DISABLED: '1', ASTRO_DISABLE_UPDATE_CHECK: 'true' };
}
