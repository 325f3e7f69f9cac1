import { HttpClient, type HttpContext, HttpEventType, HttpHeaders } from '@angular/common/http';
import { inject, Injectable, type ResourceRef } from '@angular/core';
import { rxResource } from '@angular/core/rxjs-interop';
import type { BodyInput, ParamsOf, QueryInput, ReplyOf, RouteSpec } from '@leanyear/contract/route';
import { filter, map, type Observable } from 'rxjs';

type Part<Name extends string, T> = [T] extends [undefined]
  ? { readonly [K in Name]?: undefined }
  : { readonly [K in Name]: T };

/** What a call to this route must bring, and no more. */
export type CallArgs<R extends RouteSpec> = Part<'params', ParamsOf<R>> &
  Part<'body', BodyInput<R>> & {
    readonly query?: QueryInput<R>;
    /** Version that was read, for routes that edit. */
    readonly ifMatch?: number;
    /** Makes a repeated request answer the first one's result. */
    readonly idempotencyKey?: string;
    readonly context?: HttpContext;
  };

/** How far an upload is; `reply` comes last. */
export type UploadStep<T> = { readonly sent: number; readonly total: number } | { readonly reply: T };

const ROOT = '/api/v1';

export function pathOf(spec: RouteSpec, params: unknown): string {
  const values = (params ?? {}) as Record<string, unknown>;
  return ROOT + spec.path.replace(/:(\w+)/g, (_, name: string) => encodeURIComponent(String(values[name])));
}

function queryOf(query: unknown): Record<string, string> {
  const given = Object.entries((query ?? {}) as Record<string, unknown>).filter(
    ([, value]) => value !== undefined && value !== null,
  );
  return Object.fromEntries(given.map(([name, value]) => [name, String(value)]));
}

/** Calls the routes of the contract: what goes out and comes back has the types that the contract states. */
@Injectable({ providedIn: 'root' })
export class Api {
  private readonly http = inject(HttpClient);

  /** One call. Fails with a ProblemError. */
  send<R extends RouteSpec>(spec: R, args: CallArgs<R>): Observable<ReplyOf<R>> {
    return this.http.request<ReplyOf<R>>(spec.method.toUpperCase(), pathOf(spec, args.params), {
      body: args.body,
      ...this.options(args),
    });
  }

  /** A file with the other fields of its form, told as it goes. */
  upload<R extends RouteSpec>(spec: R, args: CallArgs<R>, file: File): Observable<UploadStep<ReplyOf<R>>> {
    const form = new FormData();
    // Fields before the file, so that the server can refuse before it has read the file.
    for (const [name, value] of Object.entries(args.body ?? {})) form.append(name, String(value));
    form.append('file', file, file.name);
    return this.http
      .request<ReplyOf<R>>(spec.method.toUpperCase(), pathOf(spec, args.params), {
        body: form,
        reportProgress: true,
        observe: 'events',
        ...this.options(args),
      })
      .pipe(
        map((event): UploadStep<ReplyOf<R>> | null => {
          if (event.type === HttpEventType.UploadProgress)
            return { sent: event.loaded, total: event.total ?? file.size };
          return event.type === HttpEventType.Response ? { reply: event.body as ReplyOf<R> } : null;
        }),
        filter((step) => step !== null),
      );
  }

  /**
   * What a route answers, read again whenever `args` change; undefined args read nothing. Call it where injection works.
   * In templates ask `hasValue()` first: `value()` of a failed resource throws.
   */
  resource<R extends RouteSpec>(
    spec: R,
    args: () => CallArgs<R> | undefined,
  ): ResourceRef<ReplyOf<R> | undefined> {
    return rxResource({ params: args, stream: ({ params }) => this.send(spec, params as CallArgs<R>) });
  }

  private options<R extends RouteSpec>(args: CallArgs<R>) {
    let headers = new HttpHeaders();
    if (args.ifMatch !== undefined) headers = headers.set('If-Match', `"${args.ifMatch}"`);
    if (args.idempotencyKey !== undefined) headers = headers.set('Idempotency-Key', args.idempotencyKey);
    return { headers, params: queryOf(args.query), ...(args.context ? { context: args.context } : {}) };
  }
}
