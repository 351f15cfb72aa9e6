import { feet, surfacePoints } from './documents';
import { ACCURACY, MARK_SIGMA, MARKS } from './fieldwork';

export interface Site {
  /** Address of the project. */
  url: string;
  projectId: string;
  key: string;
}

/** Opens a project with control, an instrument, a surface and a layer, through the API. */
export async function newSite(hubUrl: string, key: string, name: string): Promise<Site> {
  const send = (url: string) => async (path: string, body: object) => {
    const response = await fetch(`${url}${path}`, {
      method: 'POST',
      headers: { Authorization: `Bearer ${key}`, 'Content-Type': 'application/json' },
      body: JSON.stringify(body),
    });
    const answer = (await response.json()) as { id: string };
    if (response.status >= 300) throw new Error(`POST ${path}: ${JSON.stringify(answer)}`);
    return answer;
  };
  const projects = `${hubUrl}/api/v1/projects`;
  const { id } = await send(projects)('', { name, lengthUnit: 'ft', frame: { kind: 'local' } });
  const url = `${projects}/${id}`;
  const post = send(url);
  const units = { length: 'ft' };
  await post('/control-points', {
    units,
    points: MARKS.map((mark) => ({
      name: mark.name,
      easting: feet(mark.easting, 6),
      northing: feet(mark.northing, 6),
      elevation: feet(mark.elevation, 6),
      sigma: { horizontal: feet(MARK_SIGMA, 6), vertical: feet(MARK_SIGMA, 6) },
    })),
  });
  await post('/instruments', { name: 'TS-2', kind: 'totalStation', accuracy: ACCURACY });
  const surface = await post('/surfaces', {
    units,
    name: 'Pad',
    represents: 'subgrade',
    points: surfacePoints(),
  });
  await post('/layers', {
    units,
    name: 'subgrade',
    surfaceId: surface.id,
    offset: 0,
    tolerance: { below: 0.1, above: 0.1 },
  });
  return { url, projectId: id, key };
}
