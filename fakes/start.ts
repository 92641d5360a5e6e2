import { createResendFake, type ResendFake, type ResendFakeOptions } from './resend/fake';
import { createStripeFake, type StripeFake, type StripeFakeOptions } from './stripe/fake';
import { listen } from './web/listen';

export type Running<Fake> = { url: string; port: number; fake: Fake; close: () => Promise<void> };

/**
 * Starts the Stripe fake on 127.0.0.1. Port 0, or none, takes any free one.
 * @throws Error with a plain sentence when the port or the state file cannot be used.
 */
export async function startStripeFake(
  options: StripeFakeOptions & { port?: number } = {},
): Promise<Running<StripeFake>> {
  const fake = createStripeFake(options);
  const running = await serve(fake, options.port ?? 0);
  fake.setPublicUrl(options.publicUrl ?? running.url);
  return running;
}

/**
 * Starts the Resend fake on 127.0.0.1. Port 0, or none, takes any free one.
 * @throws Error with a plain sentence when the port or the state file cannot be used.
 */
export async function startResendFake(
  options: ResendFakeOptions & { port?: number } = {},
): Promise<Running<ResendFake>> {
  return serve(createResendFake(options), options.port ?? 0);
}

async function serve<Fake extends StripeFake | ResendFake>(fake: Fake, port: number): Promise<Running<Fake>> {
  try {
    const listener = await listen(fake.handle, port);
    const close = async (): Promise<void> => {
      await listener.close();
      await fake.close();
    };
    return { url: listener.url, port: listener.port, fake, close };
  } catch (error) {
    await fake.close();
    throw error;
  }
}
