import type * as z from 'zod';
import type { RequestProblemCode } from './problemCodes';
import type { Scope } from './scopes';

export type Method = 'get' | 'post' | 'patch' | 'delete';

export interface Body {
  /** Schema of `application/json`. */
  json?: z.ZodType;
  /** Media types taken as text beside it. */
  text?: readonly string[];
  /** Arrays of the JSON body whose items are accepted or refused one by one. */
  itemwise?: readonly string[];
  /** The verb gets the bytes as they came and reads them itself; the schema is what it reads them with. */
  raw?: true;
  /** Largest size in bytes, before and after decompression; 1 MiB by default. */
  limit?: number;
  optional?: true;
}

/** Media types that an operation takes. */
export function mediaTypesOf({ json, text = [] }: Body): string {
  return [...(json ? ['application/json'] : []), ...text].join(', ');
}

export interface Answer {
  description: string;
  /** Schema of a JSON answer. */
  json?: z.ZodType;
  /** Media type of an answer that is not JSON. */
  media?: string;
  /** Headers of its own, with what they say. */
  headers?: Readonly<Record<string, string>>;
}

/**
 * One operation: the only place where its path, scope, shapes and problems stand. Validation, types, the
 * document, the console's client and the security tests are made of it.
 */
export interface Contract {
  id: string;
  method: Method;
  /** Under /api/v1, parameters in braces. */
  path: `/${string}`;
  tag: string;
  summary: string;
  description: string;
  /** The scope it asks for; `signedIn` = any known actor; `public` = nobody need be known. */
  access: Scope | 'signedIn' | 'public';
  /** About the organization as a whole: a key that is bound to projects has no part in it. */
  organizationWide?: true;
  params?: z.ZodObject;
  query?: z.ZodObject;
  /** Headers of its own, for the document. */
  headers?: z.ZodObject;
  body?: Body;
  answers: Readonly<Record<number, Answer>>;
  /** The answer holds a secret that is shown once: it is not kept for a repeated request. */
  secret?: true;
  /** Problems of its own, beside those that every operation may answer. */
  problems?: readonly RequestProblemCode[];
}

/** Keeps the literal types of an operation. */
export function contract<const C extends Contract>(definition: C): C {
  return definition;
}

type Output<T> = T extends z.ZodType ? z.output<T> : undefined;

export type ParamsOf<C extends Contract> = Output<C['params']>;
export type QueryOf<C extends Contract> = Output<C['query']>;
export type JsonOf<C extends Contract> = C['body'] extends { json: infer S } ? Output<S> : undefined;

/** What a caller sends as JSON. */
export type SentOf<C extends Contract> = C['body'] extends { json: infer S extends z.ZodType }
  ? z.input<S>
  : undefined;

/** What the operation answers where it succeeds. */
export type AnswerOf<C extends Contract> = {
  [S in keyof C['answers']]: C['answers'][S] extends { json: infer J } ? Output<J> : undefined;
}[keyof C['answers']];

/** The first success status of an operation: what a plain answer is sent with. */
export function successStatus(operation: Contract): number {
  return Number(Object.keys(operation.answers)[0]);
}
