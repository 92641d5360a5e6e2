import { dispatchCommission, finishCommission, recordDelivery } from '../../server/making/finishing';
import { must, type World } from '../world';
import { reach } from './bench';

/** The studio declares the work finished; the balance falls due. */
export async function finish(world: World, ref: string): Promise<void> {
  must(await finishCommission(world.services, world.person('wren'), ref), `${ref} finished`);
}

/** Packed and handed to the carrier. */
export async function send(
  world: World,
  ref: string,
  parcel: { carrier: string; tracking: string; adult: boolean; looks: string; duties?: string },
): Promise<void> {
  await reach(world, ref, 'pell', 'packed');
  const { carrier, tracking, adult, looks, duties } = parcel;
  const input = { carrier, tracking, adultSignature: adult, parcel: looks, ...(duties ? { duties } : {}) };
  must(await dispatchCommission(world.services, world.person('wren'), ref, input), `${ref} dispatch`);
}

/** The customer says that the parcel is there. */
export async function arrive(world: World, ref: string, customer: string): Promise<void> {
  must(await recordDelivery(world.services, world.person(customer), ref), `${ref} delivery`);
}
