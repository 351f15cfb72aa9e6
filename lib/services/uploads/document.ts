import type * as z from 'zod';
import { sha256 } from '@/lib/access/secrets';
import { BodyError, bodyText, type RawBody } from '@/lib/formats/body';
import { type Itemwise, parseItemwise } from '@/lib/formats/itemwise';
import { JsonError, parseStrictJson } from '@/lib/formats/strictJson';
import { invalidItems, Problem } from '@/lib/problem';
import { problemItem } from '@/openapi/problemItem';
import type { ProblemItem } from '@/openapi/schemas/problem';
import { UPLOAD_KINDS, UploadDocument } from '@/openapi/schemas/upload';
import { type BookQuery, readLevelBook } from './levelBook';
import type { Needs } from './site';

export type Document = z.output<typeof UploadDocument>;
export interface ReadDocument extends Itemwise<Document> {
  /** SHA-256 of what was in a compressed body, or of what a table and its address stand for; null where it came as it is. */
  contentSha256: Buffer | null;
  /** A problem of the document where it stands in what was sent, if that is not the document itself. */
  asSent?: (item: ProblemItem) => ProblemItem;
}

/** What only a table takes from the address. */
const BOOK_ONLY = ['clientId', 'instrument', 'observedAt', 'confirmUnits'] as const;
const OF_TABLES = 'It stands in the document itself; in the address it belongs to a table.';

/** @throws Problem where the body cannot be read at all */
export async function readDocument(raw: RawBody, query: BookQuery): Promise<ReadDocument> {
  if (raw.bytes.byteLength === 0) throw new Problem('body_required');
  try {
    const text = await bodyText(raw);
    if (raw.mediaType === 'text/csv') return readLevelBook(text, query);
    if (raw.mediaType !== 'application/json') {
      const declared = raw.mediaType === '' ? 'nothing' : raw.mediaType.slice(0, 80);
      throw new BodyError(
        'media_type_unsupported',
        `Uploads are application/json, or text/csv for a level book; declared was ${declared}.`,
      );
    }
    const beside = BOOK_ONLY.filter((name) => query[name] !== undefined);
    if (beside.length > 0)
      throw invalidItems(beside.map((name) => problemItem(`?${name}`, 'mutually_exclusive', OF_TABLES)));
    const { value, flaws } = parseStrictJson(text);
    return {
      ...parseItemwise(UploadDocument, UPLOAD_KINDS, value, flaws),
      contentSha256: raw.contentEncoding === null ? null : sha256(await raw.content),
    };
  } catch (error) {
    if (error instanceof BodyError || error instanceof JsonError)
      throw new Problem(error.code, error.message);
    throw error;
  }
}

/** The names in a document. */
export function needsOf(document: Document): Needs {
  const needs: Needs = {
    clientId: document.clientId,
    control: new Set(),
    registry: document.setups.some(({ method }) => method === 'identify'),
    instruments: new Set(),
    layers: new Set(),
    setups: new Set(),
    setupClientIds: document.setups.map((item) => item.clientId),
    checkClientIds: document.setupChecks.map((item) => item.clientId),
    gradeClientIds: document.gradeShots.map((item) => item.clientId),
    benchClientIds: document.benchChecks.map((item) => item.clientId),
    levelClientIds: document.levelRuns.map((item) => item.clientId),
    pegClientIds: document.pegTests.map((item) => item.clientId),
  };
  for (const setup of document.setups) {
    needs.instruments.add(setup.instrument);
    if (setup.stationPoint !== undefined) needs.control.add(setup.stationPoint);
    for (const { target } of setup.shots) if (target !== null) needs.control.add(target);
  }
  for (const check of document.setupChecks) {
    needs.setups.add(check.setup);
    for (const { target } of check.shots) if (target !== null) needs.control.add(target);
  }
  for (const shot of document.gradeShots) {
    needs.layers.add(shot.layer);
    if (shot.setup !== undefined) needs.setups.add(shot.setup);
  }
  for (const bench of document.benchChecks) {
    needs.control.add(bench.benchmark);
    if (bench.layer !== undefined) needs.layers.add(bench.layer);
    if (bench.setup !== undefined) needs.setups.add(bench.setup);
  }
  for (const run of document.levelRuns) {
    needs.control.add(run.from);
    if (run.instrument !== undefined) needs.instruments.add(run.instrument);
    for (const { point } of run.sights) needs.control.add(point);
  }
  for (const { instrument } of document.pegTests) needs.instruments.add(instrument);
  return needs;
}
