import { bookEntry, acceptedStages, type StagePayment } from '../../server/money/ledger';
import { lockCommission } from '../../server/commissions';
import { welcomePayment } from '../../server/money/payments';
import { commissionOf, type World } from '../world';

/** The customer pays the stage of that trigger in full, and what follows from it happens. */
export async function pay(world: World, ref: string, trigger: StagePayment['trigger']): Promise<void> {
  const { services } = world;
  const { id } = await commissionOf(world, ref);
  await services.db.transaction(async (tx) => {
    const commission = await lockCommission(tx, id);
    const stage = (await acceptedStages(tx, id)).find((each) => each.trigger === trigger);
    if (!stage) throw new Error(`The demo’s ${ref} has no payment at ${trigger}.`);
    const entry = await bookEntry(tx, {
      commissionId: id,
      stagePaymentId: stage.id,
      kind: 'received',
      amountMinor: stage.grossMinor,
      currency: stage.currency,
      providerId: `pi_demo_${ref}_${trigger}`,
      cause: { stage: stage.id, demo: true },
      at: services.now(),
    });
    if (entry) await welcomePayment(services, tx, commission, entry);
  });
}
