import type { CallerContext } from '@/lib/services/context';
import { utcInstant } from '@/lib/services/moments';
import { isAgreed, judgeWithCheck } from '@/lib/services/setups/compute';
import type { CheckRow } from '@/lib/services/setups/load';
import { METHOD_VERSION, methodOf } from '@/lib/services/setups/result';
import { problemItem } from '@/openapi/problemItem';
import type { ProblemItem } from '@/openapi/schemas/problem';
import type { Document } from './document';
import { type Draft, findSetup, pointerOf, successorOf } from './draft';
import {
  asEngineShot,
  incompleteChecks,
  type NormalShot,
  normaliseShots,
  observationRow,
  pointerIn,
} from './shotsOfSetup';
import type { Site, SiteSetup } from './site';

type CheckItem = Document['setupChecks'][number];

/** Judges setups again with the check shots that came later. */
export function draftSetupChecks(draft: Draft, context: CallerContext): void {
  draft.document.setupChecks.forEach((item, index) => {
    draft.refused.push(...draftCheck(draft, context, item, pointerOf(draft, 'setupChecks', index)));
  });
}

function draftCheck(draft: Draft, context: CallerContext, item: CheckItem, pointer: string): ProblemItem[] {
  const { site, document, rows } = draft;
  const { runtime } = context;
  if (site.taken.checks.has(item.clientId)) {
    return [
      problemItem(
        `${pointer}/clientId`,
        'client_id_taken',
        `A setup check ${item.clientId} was accepted before.`,
      ),
    ];
  }
  const found = findSetup(draft, item.setup);
  if (!found)
    return [
      problemItem(`${pointer}/setup`, 'setup_unknown', `There is no setup ${item.setup} in this project.`),
    ];
  if (!found.result.orientationDetermined) {
    const detail = `No direction was read in ${item.setup}.`;
    return [problemItem(`${pointer}/setup`, 'setup_without_orientation', detail)];
  }
  const ids = new Set(found.shotIds);
  // They are the check's, whatever they say of themselves.
  const sent = item.shots.map((shot) => ({ ...shot, purpose: item.purpose }));
  const { shots, problems } = normaliseShots(sent, document.units, site, pointer, { taken: ids });
  const at = pointerIn(pointer, item.shots);
  problems.push(...incompleteChecks(shots, at));
  if (problems.length === 0) problems.push(...unusable(shots, site, `${pointer}/shots`));
  if (problems.length > 0) return problems;

  const observedAt =
    item.observedAt === undefined ? runtime.now().toISOString() : utcInstant(item.observedAt);
  const origin: CheckOrigin = {
    uploadId: draft.uploadId,
    clientId: item.clientId,
    purpose: item.purpose,
    observedAt,
    carriedFromId: null,
  };
  const check = judge(draft, context, found, origin, shots);
  draft.checks.push(check);
  // A refit does not leave behind what comes late: the shots judge what stands in the setup's place too.
  const successor = successorOf(draft, found);
  if (successor) judge(draft, context, successor, { ...origin, carriedFromId: check.id }, shots);
  const { organizationId, projectId, id: checkId } = check;
  shots.forEach((shot, seq) => {
    rows.observations.push(
      observationRow(shot, seq, {
        organizationId,
        projectId,
        setupId: found.setup.rootId,
        checkId,
        identified: false,
      }),
    );
  });
  site.taken.checks.add(item.clientId);
  return [];
}

type CheckOrigin = Pick<CheckRow, 'uploadId' | 'clientId' | 'purpose' | 'observedAt' | 'carriedFromId'>;

/** Judges one setup with check shots; what follows in this upload sees it as it is then. */
function judge(
  draft: Draft,
  { caller, runtime }: CallerContext,
  found: SiteSetup,
  origin: CheckOrigin,
  shots: readonly NormalShot[],
): CheckRow {
  const { site, rows } = draft;
  const { setup, result, checks } = found;
  const before = checks.filter((check) => new Date(check.observedAt) <= new Date(origin.observedAt));
  const after = checks.filter((check) => !before.includes(check));
  const [earlier, later] = [before, after].map((some) => some.map((check) => check.result.targets));
  const judged = judgeWithCheck(result, shots.map(asEngineShot), site.control, earlier, later);
  const resultVersion = setup.resultVersion + 1;
  const check: CheckRow = {
    ...origin,
    organizationId: caller.organizationId,
    id: runtime.uuid(),
    projectId: site.project.id,
    setupId: setup.id,
    agreed: isAgreed(judged.check.targets),
    result: judged.check,
    resultVersion,
  };
  rows.setupChecks.push(check);
  // In the order that they were observed in, as they are read later.
  checks.splice(before.length, 0, check);
  const resultRow = {
    organizationId: caller.organizationId,
    setupId: setup.id,
    version: resultVersion,
    method: methodOf(judged.result),
    methodVersion: METHOD_VERSION,
    result: judged.result,
    computedAt: runtime.now().toISOString(),
  };
  rows.setupResults.push(resultRow);
  setup.resultVersion = resultVersion;
  setup.verdict = judged.result.verdict;
  const made = draft.setups.find((loaded) => loaded.setup.id === setup.id);
  if (made) made.result = resultRow;
  else {
    found.result = judged.result;
    found.shotIds.push(...shots.map(({ sent }) => sent.clientId));
    draft.rejudged.set(setup.id, setup);
  }
  draft.happenings.push({
    type: 'setup.checked',
    subject: setup.id,
    projectId: site.project.id,
    data: { station: setup.station, agreed: check.agreed, verdict: judged.result.verdict },
  });
  return check;
}

/** A check says something by one mark at least that may be used. */
function unusable(shots: readonly NormalShot[], site: Site, pointer: string): ProblemItem[] {
  const names = [...new Set(shots.map(({ sent }) => sent.target))];
  if (names.some((name) => site.control.get(name)?.status !== 'quarantined')) return [];
  const detail = `${names.join(', ')}: quarantined, and no other mark was shot.`;
  return [problemItem(pointer, 'target_quarantined', detail)];
}
