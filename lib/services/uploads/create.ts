import { inSavepoint } from '@/db/savepoint';
import type { Tenant } from '@/db/tenant';
import { sha256 } from '@/lib/access/secrets';
import type { Surface } from '@/lib/compute/grade/surface';
import type { RawBody } from '@/lib/formats/body';
import { log } from '@/lib/log/log';
import { invalidItems, Problem } from '@/lib/problem';
import { answerOnce } from '@/lib/services/answerOnce';
import type { CallerContext, VerbContext } from '@/lib/services/context';
import { isStriking, watchControl } from '@/lib/services/control/watch';
import { Lengths, otherFoot } from '@/lib/services/lengths';
import { openSurface } from '@/lib/services/surfaces/open';
import type { ParamsOf, QueryOf } from '@/openapi/contract';
import type * as contract from '@/openapi/contracts/uploads';
import { problemItem } from '@/openapi/problemItem';
import type { ProblemItem } from '@/openapi/schemas/problem';
import { UPLOAD_KINDS } from '@/openapi/schemas/upload';
import { draftBenchChecks } from './benchChecks';
import { type Document, needsOf, type ReadDocument, readDocument } from './document';
import { type Draft, pointerOf } from './draft';
import { draftGradeShots } from './gradeShots';
import { keepRefused, rawAndUpload } from './keep';
import { draftLevelRuns } from './levelRuns';
import { draftPegTests } from './pegTests';
import { loadReceipt, presentReceipt } from './receipt';
import { draftSetupChecks } from './setupChecks';
import { draftSetups } from './setups';
import { loadSite, type Site } from './site';
import { isOvertaken, writeUpload } from './write';

type Create = typeof contract.createUpload;
type Input = { params: ParamsOf<Create>; query: QueryOf<Create> };

/** The document of a body, or why it cannot be read at all. */
export type Prepared = ReadDocument | Problem;

/**
 * Receives observations: the bytes are kept with their results in one transaction or, where nothing of them can be
 * accepted, as refused in a second one.
 */
export const createUpload = {
  async prepare(raw: RawBody, { query }: Input): Promise<Prepared> {
    try {
      return await readDocument(raw, query);
    } catch (error) {
      if (error instanceof Problem) return error;
      throw error;
    }
  },

  /** All that the document names, in one read. */
  ahead(tenant: Tenant, { params }: Input, prepared: Prepared): Promise<Site | null> | null {
    if (prepared instanceof Problem || prepared.value === null) return null;
    return loadSite(tenant, params.projectId, needsOf(prepared.value));
  },

  run(
    context: VerbContext,
    input: Input & { raw: RawBody },
    prepared: Prepared,
    ahead: Promise<Site | null> | null,
  ) {
    return answerOnce(context, 'createUpload', async () => {
      if (prepared instanceof Problem) throw prepared;
      const { status, receipt } = await process(context, input, prepared, await ahead);
      return { status, text: JSON.stringify(receipt) };
    });
  },

  async refused(
    context: CallerContext,
    { params, raw }: Input & { raw: RawBody },
    prepared: Prepared,
    problem: Problem,
  ) {
    if (!isKept(problem)) return;
    const clientId = prepared instanceof Problem ? null : (prepared.value?.clientId ?? null);
    await keepRefused(context, params.projectId, raw, clientId, problem);
  },
};

/** Nothing is kept for a project that is not there, nor twice of a request that is being answered already. */
function isKept({ code }: Problem): boolean {
  return (
    code !== 'not_found' &&
    code !== 'request_in_progress' &&
    code !== 'body_too_large' &&
    code !== 'body_required'
  );
}

async function process(
  context: VerbContext,
  { params, query, raw }: Input & { raw: RawBody },
  read: ReadDocument,
  site: Site | null,
) {
  const { tenant } = context;
  const document = read.value;
  if (document === null) throw refusal(read);
  if (!site) throw new Problem('not_found', 'There is no such project.');
  const length = new Lengths(query.length ?? site.project.lengthUnit);
  if (site.before) {
    const content = read.contentSha256 ?? sha256(raw.bytes);
    if (site.before.contentSha256 !== content.toString('hex')) throw new Problem('upload_conflict');
    return { status: 200, receipt: await loadReceipt(tenant, site.project, site.before.id, length) };
  }
  const foot = otherFoot(
    site.project.lengthUnit,
    document.units.length,
    document.confirmUnits,
    '/units/length',
  );
  const { asSent = (item: ProblemItem) => item } = read;
  if (foot) throw invalidItems([asSent(foot)]);

  let draft = await drafted(context, document, read, site);
  while (await isOvertaken(tenant, context.caller.organizationId, draft)) {
    const now = await loadSite(tenant, params.projectId, needsOf(document));
    if (!now) throw new Problem('not_found', 'There is no such project.');
    draft = await drafted(context, document, read, now);
  }
  const { setups, checks, gradeRows, benchRows, levelRows, pegRows } = draft;
  const refused = draft.refused.map(asSent);
  const kinds = [setups, checks, gradeRows, benchRows, levelRows, pegRows];
  const accepted = kinds.reduce((count, items) => count + items.length, 0);
  if (accepted === 0) {
    const empty = problemItem('', 'required', 'The document holds no item.');
    throw new Problem('nothing_accepted', undefined, { errors: refused.length > 0 ? refused : [empty] });
  }
  const kept = rawAndUpload(context, params.projectId, raw, {
    uploadId: draft.uploadId,
    clientId: document.clientId,
    contentSha256: read.contentSha256,
    status: 'processed',
    accepted,
    refusals: refused,
  });
  writeUpload(tenant, context, draft, kept);
  await watchStriking(context, draft);
  const parts = {
    upload: kept.uploadRow,
    raw: kept.facts,
    refused,
    setups,
    checks,
    grade: gradeRows,
    bench: benchRows,
    levelRuns: levelRows,
    pegTests: pegRows,
  };
  const layerOf = (row: { layerName: string }) => draft.site.layers.get(row.layerName)!;
  return { status: 201, receipt: presentReceipt(parts, layerOf, length, site.project.displayDecimals) };
}

/** What becomes of a document where the project stands as it was read. */
async function drafted(
  context: VerbContext,
  document: Document,
  read: ReadDocument,
  site: Site,
): Promise<Draft> {
  const draft = newDraft(context.runtime.uuid(), document, read, site);
  draftSetups(draft, context);
  draftSetupChecks(draft, context);
  draftGradeShots(draft, context, await openLayers(context, site, document));
  draftBenchChecks(draft, context);
  draftPegTests(draft, context);
  draftLevelRuns(draft, context);
  refuseUncomputed(draft);
  return draft;
}

/**
 * Looks at the marks of setups that do not fit well: one of them may have moved. What was just written is seen. Where
 * the look fails the upload stands; the next one comes within minutes.
 */
async function watchStriking(context: VerbContext, { setups, site }: Draft): Promise<void> {
  const striking = setups.filter(({ result }) => isStriking(result.result));
  const names = striking.flatMap(({ result }) => result.result.marks.map(({ name }) => name));
  if (names.length === 0) return;
  try {
    await inSavepoint(context.tenant, (tenant) =>
      watchControl({ ...context, tenant }, site.project, [...new Set(names)]),
    );
  } catch (err) {
    log().error({ requestId: context.requestId, err }, 'control was not looked at');
  }
}

/** A document of which nothing is left: each item was bad, or something beside the items. */
function refusal({ problems, asSent = (item) => item }: ReadDocument): Problem {
  const itemsAlone = problems.every(({ pointer }) =>
    UPLOAD_KINDS.some((kind) => pointer.startsWith(`/${kind}/`)),
  );
  const errors = problems.map(asSent);
  return itemsAlone ? new Problem('nothing_accepted', undefined, { errors }) : invalidItems(errors);
}

function newDraft(
  uploadId: string,
  document: Document,
  { places, problems }: ReadDocument,
  site: Site,
): Draft {
  return {
    uploadId,
    document,
    places,
    site,
    refused: [...problems],
    setups: [],
    checks: [],
    gradeRows: [],
    benchRows: [],
    levelRows: [],
    pegRows: [],
    rows: {
      setups: [],
      setupResults: [],
      observations: [],
      setupChecks: [],
      gradeChecks: [],
      benchChecks: [],
      pegTests: [],
      levelRuns: [],
      levelDifferences: [],
    },
    rejudged: new Map(),
    happenings: [],
  };
}

async function openLayers({ tenant, caller }: VerbContext, site: Site, document: Document) {
  const surfaces = new Map<string, Surface>();
  if (document.gradeShots.length === 0) return surfaces;
  for (const { surfaceSha256 } of site.layers.values()) {
    surfaces.set(surfaceSha256, await openSurface(tenant, caller.organizationId, surfaceSha256));
  }
  return surfaces;
}

function refuseUncomputed(draft: Draft): void {
  draft.document.roverPoints.forEach((_, index) => {
    draft.refused.push(problemItem(pointerOf(draft, 'roverPoints', index), 'kind_not_supported'));
  });
}
