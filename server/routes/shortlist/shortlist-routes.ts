import type { AppContext } from '../../app-context.js';
import { addToShortlist } from '../../commands/add-to-shortlist.js';
import { removeShortlistItem } from '../../commands/remove-shortlist-item.js';
import { updateShortlistItem } from '../../commands/update-shortlist-item.js';
import { authorize } from '../../policies/authorize.js';
import { presentShortlistItem } from '../../presenters/shortlist-item.js';
import { findShortlistItem, listShortlist } from '../../queries/shortlist.js';
import { findUnknown } from '../../queries/unknowns.js';
import { route, type Route } from '../route.js';

export function shortlistRoutes(context: AppContext): Route[] {
  return [
    route('readShortlist', async ({ actor, params }) => {
      const unknown = authorize(actor, 'unknown.read', await findUnknown(actor, params.unknownId));
      const items = await listShortlist(unknown.id);
      return { items: items.map((item) => presentShortlistItem(actor, item)) };
    }),
    route(
      'addToShortlist',
      async ({ actor, params, body }) => {
        const unknown = authorize(actor, 'unknown.editShortlist', await findUnknown(actor, params.unknownId));
        const { id } = await addToShortlist(context, actor, unknown.id, body);
        return presentShortlistItem(actor, authorize(actor, 'shortlistItem.read', await findShortlistItem(actor, id)));
      },
      { status: 201 },
    ),
    route('updateShortlistItem', async ({ actor, params, body }) => {
      const item = authorize(actor, 'shortlistItem.update', await findShortlistItem(actor, params.itemId));
      await updateShortlistItem(context, actor, item, body);
      return presentShortlistItem(actor, item);
    }),
    route('removeShortlistItem', async ({ actor, params }) => {
      await removeShortlistItem(context, actor, authorize(actor, 'shortlistItem.remove', await findShortlistItem(actor, params.itemId)));
    }),
  ];
}
