import * as commissions from './schema/commissions';
import * as making from './schema/making';
import * as people from './schema/people';
import * as quotes from './schema/quotes';
import * as studio from './schema/studio';

/** Every table and enum, for the Drizzle client. */
export const schema = { ...people, ...commissions, ...quotes, ...making, ...studio };
