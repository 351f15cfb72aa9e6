import { readdirSync } from 'node:fs';
import { gzipSync } from 'node:zlib';

const ROOM = /\/\([^/]+\)/g;
const PARAMETER = /\[\w+\]/g;

export interface FirstLoad {
  /** Address of the page, with `[…]` where it takes a name or an id. */
  page: string;
  /** Bytes of gzip of the scripts that its HTML names. */
  now: number;
  /** The same of scripts that it asks for when all of it stands. */
  later: number;
}

/** Addresses of all pages, from the folders that make them. */
function pages(): string[] {
  return readdirSync('app', { recursive: true, encoding: 'utf8' })
    .filter((file) => /(?:^|\/)page\.tsx$/.test(file))
    .map((file) => `/${file}`.replace(ROOM, '').replace(/\/page\.tsx$/, '') || '/')
    .sort();
}

/** Scripts that a page's HTML makes a browser run that knows modules. */
function scriptsOf(html: string): string[] {
  return [...html.matchAll(/<script\b[^>]*>/g)]
    .map(([tag]) => tag)
    .filter((tag) => !/\bnomodule\b/i.test(tag))
    .flatMap((tag) => /\bsrc="([^"]+)"/.exec(tag)?.[1] ?? []);
}

/** JavaScript of every page of a running hub, largest first. */
export async function firstLoads(hubUrl: string): Promise<FirstLoad[]> {
  const sizes = new Map<string, number>();
  const sizeOf = async (path: string) => {
    const known = sizes.get(path);
    if (known !== undefined) return known;
    const answer = await fetch(`${hubUrl}${path}`);
    if (!answer.ok) throw new Error(`${path} answers ${answer.status}.`);
    const size = gzipSync(Buffer.from(await answer.arrayBuffer())).length;
    sizes.set(path, size);
    return size;
  };
  const total = async (paths: Iterable<string>) => {
    let bytes = 0;
    for (const path of paths) bytes += await sizeOf(path);
    return bytes;
  };
  const loads: FirstLoad[] = [];
  for (const page of pages()) {
    const html = await (await fetch(`${hubUrl}${page.replace(PARAMETER, 'any')}`)).text();
    const scripts = new Set(scriptsOf(html));
    if (scripts.size === 0) throw new Error(`${page} names no script.`);
    const later = [...html.matchAll(/<link\b[^>]*\brel="preload"[^>]*>/g)]
      .map(([tag]) => (tag.includes('as="script"') ? /\bhref="([^"]+)"/.exec(tag)?.[1] : undefined))
      .filter((path) => path !== undefined && !scripts.has(path));
    loads.push({ page, now: await total(scripts), later: await total(new Set(later as string[])) });
  }
  return loads.sort((a, b) => b.now - a.now);
}
