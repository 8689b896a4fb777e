import type { Request, Response } from "express";
import { z } from "zod";
import type { Context } from "../context.ts";
import type { Project } from "../db/models/Project.ts";
import type { Action } from "../features/policies.ts";
import type { Anyone, Caller, PersonActor } from "./actor.ts";
import { MAX_JSON_BYTES } from "./jsonBody.ts";
import type { ProblemSlug } from "./problemCatalogue.ts";
import type { RawBody, RawContent } from "./rawBody.ts";
import type { Reply, StreamedReply } from "./reply.ts";

/** Who is let in before anything is looked at: no credentials asked for, a session, or a session or token. */
export type Auth = "anyone" | "person" | "caller";
interface Actors {
  anyone: Anyone;
  person: PersonActor;
  caller: Caller;
}

type PathNames<P extends string> = P extends `${string}:${infer Name}/${infer Rest}`
  ? Name | PathNames<`/${Rest}`>
  : P extends `${string}:${infer Name}`
    ? Name
    : never;
type Params<P extends string, S extends z.ZodRawShape> = { readonly [K in Exclude<PathNames<P>, keyof S>]: string } & {
  readonly [K in keyof S]: z.output<S[K]>;
};
type Query<Q> = Q extends z.ZodType ? z.output<Q> : Record<string, never>;
type Body<B> = B extends RawBody ? RawContent : B extends z.ZodType ? z.output<B> : undefined;
type Located<P extends string, L> =
  "project" extends PathNames<P> ? Project : L extends undefined ? undefined : Project;
type Answer<R> = R extends z.ZodType ? z.input<R> : void;

/** Everything a handler needs of one request, checked. */
export interface Call<A, P, Q, B, L> {
  readonly context: Context;
  readonly actor: A;
  readonly params: P;
  readonly query: Q;
  readonly body: B;
  /** The project of the path (or found by `locate`): it exists and the actor may know of it. */
  readonly project: L;
  readonly request: Request;
  readonly response: Response;
  readonly requestId: string;
}

/** Finds the project of a path that does not name it; null = not found. */
export type Locate = (context: Context, params: Readonly<Record<string, string>>) => Promise<Project | null>;

interface RouteOptions<P extends string, A extends Auth, S extends z.ZodRawShape, Q, B, R, L> {
  readonly method: "get" | "post" | "patch" | "put" | "delete";
  /** Below /api/v1; `:project` is a project's slug. */
  readonly path: P;
  readonly summary: string;
  readonly description?: string;
  readonly tag: string;
  readonly auth: A;
  /** The action that is asked of the policy tables; null where whoever is let in may. */
  readonly can: Action | null;
  /** Schemas of path parameters that are more than text. */
  readonly params?: S;
  readonly query?: Q;
  readonly body?: B;
  /** Largest JSON body, where that is not `MAX_JSON_BYTES`. */
  readonly maxBodyBytes?: number;
  /** Null: nothing is answered (204). */
  readonly response: R;
  readonly status?: number;
  /** Other successes, which the handler answers by `reply`. */
  readonly responses?: Readonly<Record<number, { description: string; schema: z.ZodType }>>;
  /** Content types besides JSON that the handler answers by `streamed`, with what they hold. */
  readonly streams?: Readonly<Record<string, z.ZodType>>;
  /** Problems besides those that follow from the rest. */
  readonly problems?: readonly ProblemSlug[];
  readonly locate?: L;
  handler(
    call: Call<Actors[A], Params<P, S>, Query<Q>, Body<B>, Located<P, L>>,
  ): Promise<Answer<R> | Reply | StreamedReply>;
}

/** A route as data, from which it is mounted, checked and documented. */
export interface Route {
  readonly method: "get" | "post" | "patch" | "put" | "delete";
  readonly path: string;
  readonly summary: string;
  readonly description: string | undefined;
  readonly tag: string;
  readonly auth: Auth;
  readonly can: Action | null;
  readonly params: z.ZodObject | null;
  readonly query: z.ZodType | null;
  readonly body: z.ZodType | RawBody | null;
  readonly maxBodyBytes: number;
  readonly response: z.ZodType | null;
  readonly status: number;
  readonly responses: Readonly<Record<number, { description: string; schema: z.ZodType }>>;
  readonly streams: Readonly<Record<string, z.ZodType>>;
  readonly problems: readonly ProblemSlug[];
  readonly locate: Locate | null;
  readonly handler: (call: Call<unknown, unknown, unknown, unknown, unknown>) => Promise<unknown>;
}

const pathText = z.string().min(1).max(250);

/** The only way to add a route. */
export function defineRoute<
  const P extends string,
  const A extends Auth,
  R extends z.ZodType | null,
  S extends z.ZodRawShape = Record<never, never>,
  Q extends z.ZodType | undefined = undefined,
  B extends z.ZodType | RawBody | undefined = undefined,
  L extends Locate | undefined = undefined,
>(options: RouteOptions<P, A, S, Q, B, R, L>): Route {
  const names = [...options.path.matchAll(/:(\w+)/g)].map((match) => match[1] as string);
  const shape = Object.fromEntries(names.map((name) => [name, pathText as z.ZodType]));
  return {
    method: options.method,
    path: options.path,
    summary: options.summary,
    description: options.description,
    tag: options.tag,
    auth: options.auth,
    can: options.can,
    params: names.length > 0 ? z.strictObject({ ...shape, ...options.params }) : null,
    query: options.query ?? null,
    body: options.body ?? null,
    maxBodyBytes: options.maxBodyBytes ?? MAX_JSON_BYTES,
    response: options.response,
    status: options.status ?? (options.response === null ? 204 : 200),
    responses: options.responses ?? {},
    streams: options.streams ?? {},
    problems: options.problems ?? [],
    locate: options.locate ?? null,
    handler: options.handler as unknown as Route["handler"],
  };
}
