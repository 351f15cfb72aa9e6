import { IdentificationError } from '@/lib/compute/survey/identify';
import type { Sighting } from '@/lib/compute/survey/identifyReflectors';
import {
  type Identified,
  identifyTargets,
  MOST_POINTS,
  wordsOfNoIdentification,
} from '@/lib/services/setups/identification';
import { problemItem } from '@/openapi/problemItem';
import type { ProblemItem } from '@/openapi/schemas/problem';
import type { Document } from './document';
import { asEngineShot, mixedSigmas, type NormalShot, pointerIn, type UnnamedShot } from './shotsOfSetup';
import type { Site } from './site';

/** So many setups of one upload are identified: each looks through all the control of the site. */
const MOST_IDENTIFIED = 10;

type SetupItem = Document['setups'][number];

/** Whether this setup of the document is one too many, or has too much control to be looked through. */
export function identificationLimits(
  site: Site,
  document: Document,
  item: SetupItem,
  pointer: string,
): ProblemItem[] {
  if (item.method !== 'identify') return [];
  const at = `${pointer}/method`;
  const place = document.setups.filter(({ method }) => method === 'identify').indexOf(item);
  if (place >= MOST_IDENTIFIED) {
    return [
      problemItem(
        at,
        'identification_limit',
        `The upload has more than ${MOST_IDENTIFIED} setups to identify.`,
      ),
    ];
  }
  if (site.registry && site.registry.size > MOST_POINTS) {
    const detail = `The project has more than ${MOST_POINTS.toLocaleString('en')} control points.`;
    return [problemItem(at, 'identification_limit', detail, 'Name the targets and send a resection.')];
  }
  return [];
}

export interface NamedShots extends Pick<Identified, 'identification'> {
  /** The shots whose target was found, by its name, and the checks. */
  shots: NormalShot[];
  strays: UnnamedShot[];
}

/** Names the targets of a setup's unnamed shots, or says what is wrong with them. */
export function nameTargets(
  site: Site,
  item: SetupItem,
  { unnamed, checking }: { unnamed: readonly UnnamedShot[]; checking: readonly NormalShot[] },
  sighting: Sighting,
  pointer: string,
): NamedShots | ProblemItem[] {
  try {
    const { identification, names } = identifyTargets(site.registry!.index(), {
      ...sighting,
      shots: unnamed.map((shot) => asEngineShot({ ...shot, sent: { ...shot.sent, target: '' } })),
      named: checking.map(asEngineShot),
      control: site.control,
    });
    const found = unnamed.flatMap(({ sent, readings }): NormalShot[] => {
      const target = names.get(sent.clientId);
      return target === undefined ? [] : [{ sent: { ...sent, target }, readings }];
    });
    const strays = unnamed.filter(({ sent }) => !names.has(sent.clientId));
    const mixed = mixedSigmas(found, pointerIn(pointer, item.shots));
    return mixed.length > 0 ? mixed : { identification, shots: [...found, ...checking], strays };
  } catch (error) {
    if (!(error instanceof IdentificationError)) throw error;
    const { detail, fix } = wordsOfNoIdentification(error);
    if (error.code !== 'reading_lacks')
      return [problemItem(`${pointer}/shots`, 'not_identified', detail, fix)];
    return error.facts.shots.map((id) => {
      const index = item.shots.findIndex(({ clientId }) => clientId === id);
      return problemItem(`${pointer}/shots/${index}`, 'reading_incomplete', detail, fix);
    });
  }
}
