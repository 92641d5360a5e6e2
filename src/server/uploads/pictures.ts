import sharp, { type Sharp } from 'sharp';
import { done, refuse, type Outcome } from '../../commission/problem';

sharp.concurrency(1);

/** More pixels than any phone makes; a picture that claims more is not opened. */
const MOST_PIXELS = 50_000_000;
const FORMATS = new Set(['jpeg', 'png', 'webp']);

/** A picture made anew: no metadata, no place, upright. */
export interface MadePicture {
  body: Buffer;
  width: number;
  height: number;
}

/**
 * Opens a picture and makes copies of it, each within a square of the given side in pixels. What comes
 * out is WebP without any metadata, turned upright. Damaged, huge or mislabelled input is refused.
 *
 * @param source path of the file
 */
export async function makePictures<Name extends string>(
  source: string,
  sides: Record<Name, number>,
): Promise<Outcome<Record<Name, MadePicture>>> {
  return oneAtATime(() => openAndMake(source, sides));
}

let busy: Promise<unknown> = Promise.resolve();

/** A large picture takes some hundred megabytes while it is open, so there is only ever one. */
function oneAtATime<T>(work: () => Promise<T>): Promise<T> {
  const mine = busy.then(work);
  busy = mine.catch(() => undefined);
  return mine;
}

async function openAndMake<Name extends string>(
  source: string,
  sides: Record<Name, number>,
): Promise<Outcome<Record<Name, MadePicture>>> {
  try {
    const image = sharp(source, { limitInputPixels: MOST_PIXELS, failOn: 'warning', animated: false });
    const { format } = await image.metadata();
    if (!format || !FORMATS.has(format))
      return refuse(
        'unsupported',
        'This is not a JPEG, PNG or WebP picture. Save it as one of these and send it again.',
      );
    const made = {} as Record<Name, MadePicture>;
    for (const name of Object.keys(sides) as Name[]) made[name] = await encode(image.clone(), sides[name]);
    return done(made);
  } catch (error) {
    const reason =
      error instanceof Error && /pixel limit/i.test(error.message)
        ? 'has more pixels than we can open (50 million)'
        : 'is damaged or not whole';
    return refuse('unsupported', `This picture ${reason}. Open it on your device, save it again and send that.`);
  }
}

async function encode(image: Sharp, side: number): Promise<MadePicture> {
  const { data, info } = await image
    .autoOrient()
    .resize({ width: side, height: side, fit: 'inside', withoutEnlargement: true })
    .webp({ quality: 82 })
    .toBuffer({ resolveWithObject: true });
  return { body: data, width: info.width, height: info.height };
}
