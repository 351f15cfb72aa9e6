import { Formula, M } from '@/app/reference/methods/Formula';
import type { Method } from '@/app/reference/methods/method';
import { Part } from '@/app/reference/methods/parts';

export const surfaces: Method = {
  slug: 'surfaces',
  title: 'Surfaces: planes and triangles',
  lead: 'Elevation and slope of a design surface at any place in plan: a plane, or a triangulated surface that is linear on each triangle.',
  group: 'Ground and blades',
  body: (
    <>
      <Part title="Plane">
        <p>
          Through a point, rising by the slope <M>{'s'}</M> towards the azimuth <M>{String.raw`\alpha`}</M>:
        </p>
        <Formula>{String.raw`H = H_0 + s\,\sin\alpha\,(E - E_0) + s\,\cos\alpha\,(N - N_0)`}</Formula>
      </Part>
      <Part title="Triangles">
        <p>
          As sent, or drawn by Delaunay’s rule in plan, so that no point lies within the circle of another
          triangle. On a triangle with corners <M>{'a, b, c'}</M> the place is written in barycentric measure:
        </p>
        <Formula>{String.raw`H = H_a + v\,(H_b - H_a) + w\,(H_c - H_a), \qquad v, w, 1 - v - w \ge 0`}</Formula>
        <p>
          Triangles are found through a tree of their plan rectangles. Where several meet, the first of the
          triangulation counts; they agree there.
        </p>
      </Part>
      <Part title="Identity">
        <p>
          A surface is its content: the SHA-256 of its points and triangles names it, so that the same model
          is one surface whoever brings it in, and a release binds the very model that was cut to.
        </p>
      </Part>
    </>
  ),
  assumes: ['The design is a function of the place in plan: one height each.'],
  limits: [
    'Outside the surface the answer is null, never an extrapolation.',
    'Vertical triangles carry no height and are passed over. Two heights at one place are refused.',
    'Breaklines are not taken: send the triangles.',
  ],
  units: 'Those of the request; slopes in percent, aspects as azimuths of the fall.',
  sources: [
    'de Berg and others, Computational Geometry, ch. 5 and 9 (Delaunay triangulation, interpolation of terrains).',
  ],
};
