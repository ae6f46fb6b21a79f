import type { Request, Response } from 'express';
import { z } from 'zod';
import type { Permission } from '../../shared/team/roles';
import type { SignedIn } from '../auth/sessions';
import type { Context } from '../context';

/** `anyone` needs no sign-in; everything else needs a session, and a permission where one is named. */
export type Needs = Permission | 'anyone' | 'signedIn';
export type Method = 'get' | 'post' | 'put' | 'patch' | 'delete';

export interface Call<P, Q, B> {
  context: Context;
  params: P;
  query: Q;
  body: B;
  /** Present for every route that needs a session. */
  you: SignedIn;
  /** The same, null for a stranger on an `anyone` route. */
  visitor: SignedIn | null;
  address: string;
  request: Request;
  response: Response;
}

export interface Route {
  method: Method;
  /** Below /api, with express parameters. */
  path: string;
  needs: Needs;
  summary: string;
  params: z.ZodType;
  query: z.ZodType;
  body: z.ZodType | null;
  /** Null: the handler writes the response itself (files). */
  response: z.ZodType | null;
  status: number;
  handle(call: Call<never, never, never>): unknown;
}

/** Declares a route; the table in index.ts is all there is, for mounting, for OpenAPI and for the role test. */
export function defineRoute<
  P extends z.ZodType = z.ZodObject,
  Q extends z.ZodType = z.ZodObject,
  B extends z.ZodType = z.ZodNull,
  R extends z.ZodType = z.ZodType,
>(route: {
  method: Method;
  path: string;
  needs: Needs;
  summary: string;
  params?: P;
  query?: Q;
  body?: B;
  response: R | null;
  status?: number;
  handle(
    call: Call<z.output<P>, z.output<Q>, z.output<B>>,
  ): z.input<R> | Promise<z.input<R>> | Promise<void> | void;
}): Route {
  return {
    ...route,
    params: route.params ?? z.object({}),
    query: route.query ?? z.object({}),
    body: route.body ?? null,
    status: route.status ?? 200,
    handle: route.handle as Route['handle'],
  };
}
