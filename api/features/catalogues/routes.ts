import {
  createCatalogue,
  listCatalogueEvents,
  listCatalogues,
  readCatalogue,
  releaseCatalogueVersion,
  uploadCatalogueVersion,
  withdrawCatalogueVersion,
  type CatalogueVersion,
} from '../../contract/catalogues';
import type { CatalogueMove } from '../../domain/catalogue/catalogue';
import type { Actor } from '../../domain/shared/actor';
import { NotFound } from '../../domain/shared/errors';
import { lineageOf } from '../../domain/shared/lineage';
import type { NoticeBoard } from '../../domain/shared/stream';
import { serve, type ApiRouter } from '../../http/serve';
import { moveVersion, type MoveDeps } from './move-version';
import type { CatalogueReader } from './port';
import { uploadVersion, type UploadDeps } from './upload-version';

export interface CatalogueDeps extends UploadDeps, MoveDeps {
  readonly reader: CatalogueReader;
  readonly notices: NoticeBoard;
}

export function registerCatalogues(router: ApiRouter, deps: CatalogueDeps): void {
  const { reader, notices } = deps;
  const version = async (id: string): Promise<CatalogueVersion> => {
    const found = await reader.version(id);
    if (found === null) throw new NotFound('catalogue version');
    return found;
  };

  serve(router, listCatalogues, () => reader.list());

  serve(router, readCatalogue, async ({ params }) => {
    const found = await reader.byId(params.id);
    if (found === null) throw new NotFound('catalogue');
    return found;
  });

  serve(router, createCatalogue, async ({ actor, body }) => {
    const { id } = await deps.unitOfWork.run(async (transaction) => {
      const created = await deps.catalogues.create(transaction, { ...body, lineage: lineageOf(body.name) });
      await deps.audit.append(transaction, {
        actorId: actor.personId, actor: actor.name, action: 'catalogue opened', subject: 'catalogue', subjectId: created.id, note: body.name,
      });
      return created;
    });
    return { id, ...body, released: null, versions: [] };
  });

  serve(router, uploadCatalogueVersion, async ({ actor, params, file }) => {
    if ((await reader.byId(params.id)) === null) throw new NotFound('catalogue');
    const id = await uploadVersion(deps, actor, params.id, file);
    await notices.publish({ topic: 'catalogue', id: params.id });
    return version(id);
  });

  serve(router, listCatalogueEvents, async ({ params, query }) => {
    await version(params.id);
    return reader.events(params.id, query);
  });

  const move = async (actor: Actor, id: string, kind: CatalogueMove, note: string): Promise<CatalogueVersion> => {
    const catalogueId = await moveVersion(deps, actor, id, kind, note);
    await notices.publish({ topic: 'catalogue', id: catalogueId });
    return version(id);
  };
  serve(router, releaseCatalogueVersion, ({ actor, params, body }) => move(actor, params.id, 'release', body.note));
  serve(router, withdrawCatalogueVersion, ({ actor, params, body }) => move(actor, params.id, 'withdraw', body.reason));
}
