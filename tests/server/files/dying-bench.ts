import { readFileSync } from 'node:fs';
import type { Actor } from '../../../src/commission/permissions';
import { readConfig } from '../../../src/server/config';
import { addPhoto } from '../../../src/server/making/receive-photo';
import { createServices, type Services } from '../../../src/server/services';
import { formRequest } from '../../factories/files';

/**
 * A server that is killed while it takes in a photo. Arguments: database, data folder, maker, commission, photo, the id of
 * the entry, and the point: `arrived` before the picture is made, `stored` before its row is written, `written` before
 * the row is committed.
 */
const [databaseUrl, dataFolder, maker, ref, file, clientId, point] = process.argv.slice(2) as string[];
const die = () => {
  process.kill(process.pid, 'SIGKILL');
  return new Promise<never>(() => undefined);
};
const config = { ...readConfig({ POURWRIGHT_DATA: dataFolder, LOG_LEVEL: 'silent' }), databaseUrl: databaseUrl! };
const services = createServices(config);
const { db } = services;
const begin = db.transaction.bind(db);
const dying: Services['db'] = Object.assign(Object.create(db) as Services['db'], {
  transaction: (work: Parameters<typeof begin>[0]) =>
    point === 'stored'
      ? die()
      : begin(async (tx) => {
          await work(tx);
          return die();
        }),
});
// The second question to the database, whether the photo is known, comes when the file has arrived.
let questions = 0;
if (point === 'arrived') {
  Object.assign(dying, {
    select: (...given: Parameters<typeof db.select>) => {
      questions += 1;
      return questions === 2 ? (void die(), db.select(...given)) : db.select(...given);
    },
  });
}
const actor = JSON.parse(maker!) as Actor;
const fields = { clientId: clientId!, stage: 'pattern', caption: 'Pattern with scale' };
await addPhoto({ ...services, db: dying }, actor, ref, formRequest(readFileSync(file!), 'IMG_0001.jpg', fields));
