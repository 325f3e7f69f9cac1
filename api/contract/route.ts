import type { ZodType, z } from 'zod';
import type { Permission } from '../domain/vocabulary';

/**
 * Who may call a route: one permission of the vocabulary, `signed in` for any account, `public` for none,
 * or `link` where the signed link in the path is the credential. A route that states nothing does not compile.
 */
export type Access = Permission | 'signed in' | 'public' | 'link';

export interface RouteSpec<
  Params extends ZodType | undefined = ZodType | undefined,
  Query extends ZodType | undefined = ZodType | undefined,
  Body extends ZodType | undefined = ZodType | undefined,
  Reply extends ZodType | undefined = ZodType | undefined,
> {
  readonly method: 'get' | 'post' | 'put' | 'patch' | 'delete';
  /** Path below /api/v1, parameters written `:name`. */
  readonly path: string;
  readonly access: Access;
  readonly summary: string;
  readonly tag: string;
  readonly params?: Params;
  readonly query?: Query;
  readonly body?: Body;
  /** What a success answers; absent: 204 without a body. */
  readonly reply?: Reply;
  /** Status of a success: 200 with a reply and 204 without, unless stated. */
  readonly status?: number;
  /** `etag`: the reply carries one. `if-match`: the request must bring the one it read. */
  readonly edits?: 'etag' | 'if-match';
  /** `file`: multipart with one part `file`, the body schema checking the other fields. `stream`: answers server-sent events. `bytes`: answers a file. */
  readonly form?: 'file' | 'stream' | 'bytes';
}

/** Keeps the schema types of a route specification; the identity at run time. */
export function route<
  Params extends ZodType | undefined = undefined,
  Query extends ZodType | undefined = undefined,
  Body extends ZodType | undefined = undefined,
  Reply extends ZodType | undefined = undefined,
>(spec: RouteSpec<Params, Query, Body, Reply>): RouteSpec<Params, Query, Body, Reply> {
  return spec;
}

type OutputOf<T> = T extends ZodType ? z.output<T> : undefined;
type InputOf<T> = T extends ZodType ? z.input<T> : undefined;

export type ParamsOf<R> = R extends RouteSpec<infer P, infer _Q, infer _B, infer _R> ? OutputOf<P> : never;
export type QueryOf<R> = R extends RouteSpec<infer _P, infer Q, infer _B, infer _R> ? OutputOf<Q> : never;
export type BodyOf<R> = R extends RouteSpec<infer _P, infer _Q, infer B, infer _R> ? OutputOf<B> : never;
export type ReplyOf<R> = R extends RouteSpec<infer _P, infer _Q, infer _B, infer A> ? OutputOf<A> : never;
/** What a client sends, before defaults are filled in. */
export type QueryInput<R> = R extends RouteSpec<infer _P, infer Q, infer _B, infer _R> ? InputOf<Q> : never;
export type BodyInput<R> = R extends RouteSpec<infer _P, infer _Q, infer B, infer _R> ? InputOf<B> : never;
