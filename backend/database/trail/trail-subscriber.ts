import type { EventSubscriber, FlushEventArgs, TransactionEventArgs } from '@mikro-orm/postgresql';
import { auditRuleOf } from '../audited.ts';
import { currentAct } from './act-context.ts';

/**
 * Gathers what each flush of an act changed, and refuses a change of an audited table outside one.
 * The gathering happens after the flush, when generated keys are known; the event itself is the
 * last statement of the transaction (written from `onFlush` it would precede what it reports).
 */
export class TrailSubscriber implements EventSubscriber {
  onFlush({ uow }: FlushEventArgs): void {
    const context = currentAct();
    for (const { name } of uow.getChangeSets()) {
      if (auditRuleOf(name) === undefined) continue;
      if (context === undefined) throw new Error(`${name} was changed outside act().`);
      if (context.sealed) throw new Error(`${name} was changed after its act's event was written.`);
    }
  }

  afterFlush({ uow }: FlushEventArgs): void {
    currentAct()?.changeSets.push(...uow.getChangeSets());
  }

  beforeTransactionCommit({ em }: TransactionEventArgs): void {
    const context = currentAct();
    if (context === undefined || context.sealed) return;
    if (context.changeSets.length > 0 || context.values.length > 0) {
      throw new Error(`A transaction of ${em.name} changed study data without its event.`);
    }
  }
}
