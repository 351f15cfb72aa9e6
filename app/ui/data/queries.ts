'use client';

import { type QueryClient, useInfiniteQuery, useQuery } from '@tanstack/react-query';
import { useEffect } from 'react';
import type { AnswerOf, Contract } from '@/openapi/contract';
import { type Call, call, Refusal } from './call';

export function keyOf(path: string, input: object = {}): readonly unknown[] {
  return [path, input];
}

/** Reads what an operation answers; `enabled: false` waits, `every` reads it again by itself after milliseconds. */
export function useRead<C extends Contract>(
  path: C['path'],
  input: Call<C> = {},
  enabled = true,
  every?: number,
) {
  return useQuery<AnswerOf<C>>({
    refetchInterval: every ?? false,
    queryKey: keyOf(path, input),
    queryFn: () => call<C>('GET' as Uppercase<C['method']>, path, input),
    enabled,
  });
}

interface Listed {
  data: unknown[];
  nextCursor: string | null;
}

type ItemOf<C extends Contract> = AnswerOf<C> extends { data: (infer T)[] } ? T : never;

interface Pace {
  /** `false` waits. */
  enabled?: boolean;
  /** Milliseconds after which it is read again by itself. */
  every?: number;
}

/** Reads a list page by page; `rows` holds all pages read so far. */
export function usePages<C extends Contract>(path: C['path'], input: Call<C> = {}, pace: Pace = {}) {
  const query = useInfiniteQuery({
    enabled: pace.enabled ?? true,
    refetchInterval: pace.every ?? false,
    queryKey: [...keyOf(path, input), 'pages'],
    queryFn: ({ pageParam }) =>
      call<C>('GET' as Uppercase<C['method']>, path, {
        ...input,
        query: { ...input.query, cursor: pageParam ?? undefined } as Call<C>['query'],
      }) as Promise<unknown> as Promise<Listed>,
    initialPageParam: null as string | null,
    getNextPageParam: (last) => last.nextCursor,
  });
  const rows = (query.data?.pages ?? []).flatMap((page) => page.data) as ItemOf<C>[];
  return { ...query, rows };
}

/** Reads a list to its end by itself, or up to `most` rows; what remains is read on demand. */
export function useAllPages<C extends Contract>(path: C['path'], input: Call<C>, most: number) {
  const list = usePages<C>(path, input);
  const { hasNextPage, isFetching, isError, fetchNextPage, rows } = list;
  useEffect(() => {
    if (hasNextPage && !isFetching && !isError && rows.length < most) fetchNextPage();
  }, [hasNextPage, isFetching, isError, rows.length, most, fetchNextPage]);
  return list;
}

/** After a change: everything read under these paths is read again. */
export function refresh(client: QueryClient, ...paths: string[]): Promise<void> {
  return client.invalidateQueries({ predicate: ({ queryKey }) => paths.includes(String(queryKey[0])) });
}

/** What is worth asking again: a hub that is busy or out of reach, never a refusal. */
export function shouldRetry(failures: number, error: Error): boolean {
  return failures < 2 && !(error instanceof Refusal && error.problem.status < 500);
}
