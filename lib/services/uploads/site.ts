import type { InferSelectModel } from 'drizzle-orm';
import type { projects, setupReleases } from '@/db/schema';
import type { NamedStatement, Tenant } from '@/db/tenant';
import { ControlIndex } from '@/lib/compute/survey/identifyControl';
import type { InstrumentAccuracy } from '@/lib/compute/survey/instrument';
import type { ControlMark } from '@/lib/compute/survey/shots';
import type { SetupLimits } from '@/lib/compute/survey/verdict';
import type { LastPegTest } from '@/lib/services/levelRuns/compute';
import { MOST_POINTS } from '@/lib/services/setups/identification';
import type { CheckRow, SetupRow } from '@/lib/services/setups/load';
import { readResult, type SetupResult } from '@/lib/services/setups/result';

/** What an upload names, so that one read finds it all. */
export interface Needs {
  clientId: string;
  control: Set<string>;
  instruments: Set<string>;
  layers: Set<string>;
  /** All of the site's control, for shots without names. */
  registry: boolean;
  /** Setups by clientId or id. */
  setups: Set<string>;
  setupClientIds: string[];
  checkClientIds: string[];
  gradeClientIds: string[];
  benchClientIds: string[];
  levelClientIds: string[];
  pegClientIds: string[];
}

export interface SiteInstrument {
  id: string;
  name: string;
  kind: 'totalStation' | 'rover' | 'level' | 'machine';
  version: number;
  accuracyStated: boolean;
  accuracy: InstrumentAccuracy;
  /** Of a level, there and back, m per √m; null where nothing is stated. */
  levelSigma: number | null;
  carrierWavelength: number;
  referenceRefractivity: number;
}

export interface SiteLayer {
  name: string;
  version: number;
  surfaceId: string;
  offset: number;
  below: number;
  above: number;
  represents: 'finish' | 'subgrade' | 'base' | 'ground' | 'other';
  surfaceSha256: string;
}

type SiteRelease = Pick<
  InferSelectModel<typeof setupReleases>,
  'seq' | 'action' | 'machine' | 'layerName' | 'layerVersion' | 'offset' | 'effectiveAt' | 'validUntil'
> & { surfaceSha256: string | null };

export interface SiteSetup {
  setup: SetupRow;
  result: SetupResult;
  checks: CheckRow[];
  /** Client ids of the shots that it has already. */
  shotIds: string[];
  releases: SiteRelease[];
}

export interface SitePegTest extends LastPegTest {
  instrumentId: string;
}

export interface SiteClass extends SetupLimits {
  name: string;
}

type KnownMark = ControlMark & { sigmaStated: boolean };

/** All control of a site, laid out to be searched the first time that it is. */
export interface Registry {
  size: number;
  index: () => ControlIndex;
}

/** What stands in the project of what an upload names. */
export interface Site {
  project: InferSelectModel<typeof projects>;
  classes: SiteClass[];
  /** The processed upload of the same clientId, if there is one. */
  before: { id: string; contentSha256: string } | null;
  control: Map<string, KnownMark>;
  /** All control but what is quarantined; null where every shot names its target. */
  registry: Registry | null;
  instruments: Map<string, SiteInstrument>;
  layers: Map<string, SiteLayer>;
  setups: SiteSetup[];
  /** Tests of the levels that are named, the newest last. */
  pegTests: SitePegTest[];
  taken: Record<'setups' | 'checks' | 'grade' | 'bench' | 'levels' | 'pegs', Set<string>>;
}

/** The transaction's own organization: an upload is looked up before its sender is known by name. */
const TENANT = `(select nullif(current_setting('app.organization_id', true), '')::uuid)`;

const list = (query: string) => `(select coalesce(json_agg(x), '[]') from (${query}) x)`;
const one = (query: string) => `(select to_json(x) from (${query}) x)`;

const PROJECT = `select organization_id as "organizationId", id, name, length_unit as "lengthUnit",
    combined_factor as "combinedFactor", site_elevation as "siteElevation", refraction,
    refraction_sigma as "refractionSigma", control_sigma_horizontal as "controlSigmaHorizontal",
    control_sigma_vertical as "controlSigmaVertical", position_sigma_horizontal as "positionSigmaHorizontal",
    position_sigma_vertical as "positionSigmaVertical", setup_valid_minutes as "setupValidMinutes",
    display_decimals as "displayDecimals", level_limit_per as "levelLimitPer",
    level_limit_factor as "levelLimitFactor", level_limit_citation as "levelLimitCitation"
  from projects where organization_id = ${TENANT} and id = $1`;

const CLASSES = `select name, json_build_object('horizontal', residual_horizontal, 'vertical', residual_vertical) as residual,
    json_build_object('radius', work_radius, 'horizontal', work_horizontal, 'vertical', work_vertical) as work,
    check_required as "checkRequired"
  from tolerance_classes where organization_id = ${TENANT} and project_id = $1 order by position`;

const BEFORE = `select u.id, encode(coalesce(r.content_sha256, r.sha256), 'hex') as "contentSha256"
  from uploads u join raw_bodies r on r.organization_id = u.organization_id and r.id = u.raw_body_id
  where u.organization_id = ${TENANT} and u.project_id = $1 and u.client_id = $2 and u.status = 'processed'`;

const MARK = `p.name, v.version, v.easting, v.northing, v.elevation, v.sigma_horizontal as "horizontalSigma",
    v.sigma_vertical as "verticalSigma", p.status, v.submitted -> 'sigma' <> 'null'::jsonb as "sigmaStated"
  from control_points p join control_point_versions v on v.organization_id = p.organization_id
    and v.project_id = p.project_id and v.name = p.name and v.version = p.current_version
  where p.organization_id = ${TENANT} and p.project_id = $1`;

const CONTROL = `select ${MARK} and p.name = any($3::text[])`;

const INSTRUMENTS = `select i.id, i.name, i.kind, c.version, c.accuracy_stated as "accuracyStated",
    json_build_object('direction', c.direction, 'zenith', c.zenith, 'distance', c.distance,
      'distancePpm', c.distance_ppm, 'collimation', c.collimation, 'instrumentCentring', c.instrument_centring,
      'targetCentring', c.target_centring, 'targetHeight', c.target_height) as accuracy,
    c.level_sigma as "levelSigma", c.carrier_wavelength as "carrierWavelength", c.reference_refractivity as "referenceRefractivity"
  from instruments i join instrument_calibrations c on c.organization_id = i.organization_id
    and c.instrument_id = i.id and c.version = i.calibration_version
  where i.organization_id = ${TENANT} and i.project_id = $1 and i.name = any($4::text[])`;

const PEG_TESTS = `select t.id, t.instrument_id as "instrumentId", t.collimation, t.collimation_sigma as "collimationSigma",
    t.verdict, t.observed_at as "observedAt"
  from instruments i join peg_tests t on t.organization_id = i.organization_id and t.instrument_id = i.id
  where i.organization_id = ${TENANT} and i.project_id = $1 and i.name = any($4::text[])
  order by t.observed_at, t.id`;

const LAYERS = `select distinct on (l.name) l.name, l.version, l.surface_id as "surfaceId", l."offset", l.below, l.above,
    s.represents, encode(s.sha256, 'hex') as "surfaceSha256"
  from layers l join surfaces s on s.organization_id = l.organization_id and s.id = l.surface_id
  where l.organization_id = ${TENANT} and l.project_id = $1 and l.name = any($5::text[])
  order by l.name, l.version desc`;

const camel = (table: string, columns: readonly string[]) =>
  columns
    .map(
      (c) => `${table}.${c} as "${c.replace(/_([a-z0-9])/g, (_, letter: string) => letter.toUpperCase())}"`,
    )
    .join(', ');

const SETUP = camel('s', [
  ...[
    'organization_id',
    'id',
    'project_id',
    'client_id',
    'upload_id',
    'root_id',
    'station',
    'method',
    'instrument_id',
  ],
  ...[
    'instrument_name',
    'calibration_version',
    'instrument_height',
    'tolerance_class',
    'temperature',
    'pressure',
  ],
  ...[
    'humidity',
    'observed_at',
    'result_version',
    'verdict',
    'state',
    'released_at',
    'valid_until',
    'withdrawn_at',
  ],
  ...['supersedes_id', 'superseded_by_id', 'excluded', 'submitted_by', 'submitter_person_id', 'created_at'],
]);
const CHECK = camel('c', [
  ...[
    'organization_id',
    'id',
    'project_id',
    'setup_id',
    'upload_id',
    'client_id',
    'purpose',
    'agreed',
    'result',
  ],
  ...['observed_at', 'result_version', 'carried_from_id'],
]);
const RELEASE = `${camel('e', [
  ...['seq', 'action', 'machine', 'layer_name', 'layer_version', 'effective_at', 'valid_until'],
])}, e."offset", encode(e.surface_sha256, 'hex') as "surfaceSha256"`;

/** The setups that are named, and those that refits have put in their place. */
const SETUPS = `select to_json(x) as setup, r.result, x.checks, x.releases, x."shotIds" from (
    with recursive named(id, next) as (
      select n.id, n.superseded_by_id from setups n where n.organization_id = ${TENANT} and n.project_id = $1
        and (n.client_id = any($6::text[]) or n.id = any($7::uuid[]))
      union select h.id, h.superseded_by_id from setups h, named where h.organization_id = ${TENANT} and h.id = named.next)
    select ${SETUP},
      ${list(`select ${CHECK} from setup_checks c where c.organization_id = s.organization_id and c.setup_id = s.id
        order by c.observed_at, c.id`)} as checks,
      ${list(`select ${RELEASE} from setup_releases e where e.organization_id = s.organization_id and e.setup_id = s.id
        order by e.seq`)} as releases,
      (select coalesce(json_agg(b.client_id), '[]') from observations b
        where b.organization_id = s.organization_id and b.setup_id = s.root_id) as "shotIds"
    from setups s join named on named.id = s.id where s.organization_id = ${TENANT}) x
  join setup_results r on r.organization_id = ${TENANT} and r.setup_id = x.id and r.version = x."resultVersion"`;

const taken = (table: string, parameter: number) =>
  `(select coalesce(json_agg(client_id), '[]') from ${table}
    where organization_id = ${TENANT} and project_id = $1 and client_id = any($${parameter}::text[]))`;

const SITE: NamedStatement = {
  name: 'upload_site',
  text: `select ${one(PROJECT)} as project, ${list(CLASSES)} as classes, ${one(BEFORE)} as before,
    ${list(CONTROL)} as control, ${list(INSTRUMENTS)} as instruments, ${list(LAYERS)} as layers, ${list(SETUPS)} as setups,
    ${list(PEG_TESTS)} as peg_tests,
    ${taken('setups', 8)} as taken_setups, ${taken('setup_checks', 9)} as taken_checks,
    ${taken('grade_checks', 10)} as taken_grade, ${taken('bench_checks', 11)} as taken_bench,
    ${taken('level_runs', 12)} as taken_levels, ${taken('peg_tests', 13)} as taken_pegs`,
};

const REGISTRY: NamedStatement = {
  name: 'upload_registry',
  text: `select ${list(`select ${MARK} and p.status <> 'quarantined' limit ${MOST_POINTS + 1}`)} as marks`,
};

const UUID = /^[0-9a-f]{8}-[0-9a-f]{4}-[0-9a-f]{4}-[0-9a-f]{4}-[0-9a-f]{12}$/i;

interface SiteRow {
  project: Site['project'] | null;
  classes: SiteClass[];
  before: Site['before'];
  control: KnownMark[];
  instruments: SiteInstrument[];
  layers: SiteLayer[];
  setups: SiteSetup[];
  peg_tests: SitePegTest[];
  taken_setups: string[];
  taken_checks: string[];
  taken_grade: string[];
  taken_bench: string[];
  taken_levels: string[];
  taken_pegs: string[];
}

/** Reads, in one round trip, all that an upload names; null where the project does not exist. */
export async function loadSite(tenant: Tenant, projectId: string, needs: Needs): Promise<Site | null> {
  const setups = [...needs.setups];
  const all = needs.registry ? tenant.run<{ marks: KnownMark[] }>(REGISTRY, [projectId]) : null;
  const named = tenant.run<SiteRow & Record<string, unknown>>(SITE, [
    projectId,
    needs.clientId,
    [...needs.control],
    [...needs.instruments],
    [...needs.layers],
    setups,
    setups.filter((ref) => UUID.test(ref)),
    needs.setupClientIds,
    needs.checkClientIds,
    needs.gradeClientIds,
    needs.benchClientIds,
    needs.levelClientIds,
    needs.pegClientIds,
  ]);
  const [{ rows }, registry] = await Promise.all([named, all]);
  const [row] = rows;
  if (!row.project) return null;
  const marks = registry?.rows[0].marks ?? null;
  const byName = <T extends { name: string }>(items: T[]) => new Map(items.map((item) => [item.name, item]));
  return {
    project: row.project,
    classes: row.classes,
    before: row.before,
    control: byName([...(marks ?? []), ...row.control]),
    registry: marks && registryOf(marks),
    instruments: byName(row.instruments),
    layers: byName(row.layers),
    setups: row.setups.map((setup) => ({ ...setup, result: readResult(setup.result) })),
    pegTests: row.peg_tests,
    taken: {
      setups: new Set(row.taken_setups),
      checks: new Set(row.taken_checks),
      grade: new Set(row.taken_grade),
      bench: new Set(row.taken_bench),
      levels: new Set(row.taken_levels),
      pegs: new Set(row.taken_pegs),
    },
  };
}

function registryOf(marks: readonly KnownMark[]): Registry {
  let index: ControlIndex | null = null;
  return {
    size: marks.length,
    index: () => {
      index ??= new ControlIndex(marks);
      return index;
    },
  };
}
