import { readMultipart } from '../../../src/server/storage/multipart';
import { streamedRequest } from '../../factories/files';

/** Takes in a file of 6 MB below the folder given, and prints how that failed. */
const [folder] = process.argv.slice(2);
const chunks = Array.from({ length: 96 }, () => Buffer.alloc(64 * 1024, 'a'));
try {
  const read = await readMultipart(streamedRequest(chunks), folder!, { bytes: 200 * 1024 * 1024, words: '200 MB' });
  process.stdout.write(read.ok ? 'taken' : read.problem.code);
} catch (error) {
  process.stdout.write(String((error as NodeJS.ErrnoException).code));
}
