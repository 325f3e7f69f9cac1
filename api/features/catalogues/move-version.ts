import { CATALOGUE_MOVES, refusals, type CatalogueMove, type Catalogues } from '../../domain/catalogue/catalogue';
import type { Actor } from '../../domain/shared/actor';
import type { AuditTrail } from '../../domain/shared/audit';
import { NotFound, Refused } from '../../domain/shared/errors';
import type { Transaction, UnitOfWork } from '../../domain/shared/transaction';

export interface MoveDeps {
  readonly catalogues: Catalogues;
  readonly audit: AuditTrail;
  readonly unitOfWork: UnitOfWork;
  /** On: who uploaded a version cannot be the one to release it. */
  readonly fourEyes: boolean;
}

/** Releases or withdraws a version; a release withdraws the version released before. Answers the catalogue's id. */
export function moveVersion(deps: MoveDeps, actor: Actor, versionId: string, move: CatalogueMove, note: string): Promise<string> {
  const { catalogues } = deps;
  const append = (transaction: Transaction, id: string, action: string, from: string, to: string, text: string): Promise<void> =>
    deps.audit.append(transaction, { actorId: actor.personId, actor: actor.name, action, subject: 'catalogue version', subjectId: id, from, to, note: text });
  return deps.unitOfWork.run(async (transaction) => {
    const seen = await catalogues.versionById(transaction, versionId);
    if (seen === null) throw new NotFound('catalogue version');
    await catalogues.lock(transaction, seen.catalogueId);
    const version = (await catalogues.versionById(transaction, versionId)) ?? seen;
    const reasons = refusals(move, version, actor.personId, { fourEyes: deps.fourEyes });
    if (reasons.length > 0) throw new Refused(reasons);
    if (move === 'release') {
      const former = await catalogues.releasedVersionId(transaction, version.catalogueId);
      if (former !== null) {
        await catalogues.setState(transaction, former, 'withdrawn', null);
        await append(transaction, former, 'catalogue version withdrawn', 'released', 'withdrawn', `replaced by version ${version.number}`);
      }
    }
    const { to } = CATALOGUE_MOVES[move];
    await catalogues.setState(transaction, versionId, to, move === 'release' ? actor.personId : null);
    await append(transaction, versionId, `catalogue version ${to}`, version.state, to, note);
    return version.catalogueId;
  });
}
