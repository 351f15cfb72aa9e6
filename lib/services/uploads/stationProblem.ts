import type { StationError } from '@/lib/compute/survey/stationAdjustment';
import { problemItem } from '@/openapi/problemItem';
import type { ProblemItem } from '@/openapi/schemas/problem';

/** Why the shots of a setup give no station, and what to shoot. */
export function stationProblem(
  { code, marks }: StationError,
  pointer: string,
  shots: readonly { target?: string | null }[],
): ProblemItem[] {
  if (code === 'marks_at_station') {
    return marks.map((mark) =>
      problemItem(
        `${pointer}/shots/${shots.findIndex(({ target }) => target === mark)}/target`,
        'setup_not_computable',
        `${mark} is published at the place of the mark under the instrument: no direction leads there.`,
        'Check the name of the target and that of the occupied mark, and the coordinates of both.',
      ),
    );
  }
  const [detail, fix] = wordsOf(code, marks);
  return [problemItem(`${pointer}/shots`, 'setup_not_computable', detail, fix)];
}

function wordsOf(
  code: Exclude<StationError['code'], 'marks_at_station'>,
  marks: readonly string[],
): [detail: string, fix?: string] {
  switch (code) {
    case 'too_few_sights':
      return [
        'Too few marks carry enough, or they stand at one place: two distances, or three directions, or two marks with both are the least.',
      ];
    case 'zenith_wanted':
      return [
        'Distances without a zenith angle cannot be brought to the horizontal: too few marks have both, and no zenith angle tells how high the instrument stands.',
        'Read the zenith angle with every distance.',
      ];
    case 'danger_circle':
      return [
        `The station lies on the circle through ${marks.join(', ')}, the danger circle: from every place on it these marks are seen under the same angles, so that directions alone do not say where on it the instrument stands.`,
        'Measure a distance to one of the marks, or a direction to a mark well off that circle.',
      ];
    case 'not_determined':
      return [
        'The shots leave the station undetermined: where it stands they say the same thing twice, as two distances do in line with both marks.',
      ];
  }
}
