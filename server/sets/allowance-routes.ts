import { allowancesRoutes } from '@shared/allowances';
import { demand, type SignedIn } from '../access/policy';
import type { Context } from '../context';
import type { Serve } from '../http/serve';
import { demandAllowance, giveAllowance, listAllowances, withdrawAllowance } from './allowance-rules';
import { checkClosedSet, tellPiles } from './close-set';
import { demandSet } from './set-queries';

/** Adds the routes of allowances; what they say is for leads alone. */
export function addAllowanceRoutes(serve: Serve, context: Context): void {
  const { db, clock, log } = context;
  const deed = (user: SignedIn) => ({ userId: user.id, name: user.name, now: clock.now() });
  const demandLead = (user: SignedIn, setId: string) => {
    demand(user, 'give allowances', demandSet(db, setId).set.courseId);
  };

  serve(allowancesRoutes.allowances, ({ user, params }) => {
    demandLead(user, params.setId);
    const items = listAllowances(db, params.setId, clock.now());
    return { items, total: items.length };
  });

  serve(allowancesRoutes.giveAllowance, ({ user, params, body }) => {
    demandLead(user, params.setId);
    const { result, setId, pilesChanged } = giveAllowance(db, params.setId, body, deed(user));
    if (pilesChanged) tellPiles(context, setId);
    return result;
  });

  serve(allowancesRoutes.withdrawAllowance, ({ user, params }) => {
    demandLead(user, demandAllowance(db, params.allowanceId).setId);
    const { setId, pilesChanged } = withdrawAllowance(db, params.allowanceId, deed(user));
    if (pilesChanged)
      void checkClosedSet(context, setId).catch((error: unknown) => {
        log.error({ setId, error: String(error) }, 'checking a script broke off');
      });
    return {};
  });
}
