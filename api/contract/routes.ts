import * as broker from './broker';
import * as catalogues from './catalogues';
import * as house from './house';
import * as people from './people';
import * as programmes from './programmes';
import * as quotes from './quotes';
import type { RouteSpec } from './route';
import * as runs from './runs';
import * as session from './session';
import * as submissions from './submissions';

function routesOf(module: Record<string, unknown>): [string, RouteSpec][] {
  return Object.entries(module).filter(
    (entry): entry is [string, RouteSpec] =>
      typeof entry[1] === 'object' && entry[1] !== null && 'method' in entry[1] && 'path' in entry[1],
  );
}

/** Every route of the API by its name: the OpenAPI document, the permission table and its test are made from this. */
export const ROUTES: Readonly<Record<string, RouteSpec>> = Object.fromEntries(
  [session, people, catalogues, submissions, programmes, runs, quotes, broker, house].flatMap((module) => routesOf(module)),
);
