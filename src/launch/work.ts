import { startWorker } from '../server/jobs/worker';
import { sharedServices } from '../server/services';
import { untilStopped } from './until-stopped';

/** The job worker alone, for `npm run dev`, where pages are served by Astro's development server. */
const worker = await startWorker(sharedServices());
await untilStopped([]);
await worker.stop();
process.exit(0);
