import type { ControlIndex } from './identifyControl';
import { adjustedPose, type Pose, roughPose, STRAY } from './identifyPose';
import type { Place } from './identifyReflectors';

/** An assignment and how well it explains the shots. */
export interface Weighed {
  reflectors: readonly Place[];
  marks: Int32Array;
  pose: Pose;
  matched: number;
  weightedSquares: number;
  /** ln of how much better than chance. */
  evidence: number;
}

const TURN = 2 * Math.PI;

/**
 * How much better an assignment explains the shots than chance does: the logarithm of the ratio of marginal
 * likelihoods (MacKay, Information Theory, Inference, and Learning Algorithms, ch. 28). Under the assignment each of m
 * reflectors stands on one of the marks within sight, which lie ρ to the cubic metre, its place known by σ along, across
 * and in height; the instrument stands anywhere among the N marks of the site and turned anyhow. By chance each
 * reflector stands anywhere. With n the normal matrix of east, north, height and orientation,
 *
 *   ln E = −½ vᵀPv − (m − 1) ln ρ − ln 2πN − Σ ln((2π)^{3/2} σ σ σ) + 2 ln 2π − ½ ln |n|.
 *
 * A reflector more on its mark is worth what it is unlikely to find there a mark by chance: much where marks are few
 * and σ small, little among many. An axis of height is left out where a mark has no elevation.
 */
export function weigh(
  index: ControlIndex,
  reflectors: readonly Place[],
  marks: Int32Array,
  start: Pose,
): Weighed {
  const { pose, weightedSquares } = adjustedPose(index, reflectors, marks, start);
  const range = reflectors.reduce((far, { east, north }) => Math.max(far, Math.hypot(east, north)), 0);
  const { density, height } = surroundingMarks(index, pose, range);
  let matched = 0;
  let evidence = -weightedSquares / 2 + Math.log(density) - Math.log(TURN * index.marks.length);
  for (let k = 0; k < marks.length; k++) {
    const mark = marks[k];
    if (mark === STRAY) continue;
    matched++;
    const { along, across, vertical } = reflectors[k];
    const own = index.horizontal[mark];
    const plan = TURN * Math.hypot(along, own) * Math.hypot(across, own);
    const upright = Math.sqrt(TURN) * Math.hypot(vertical, index.vertical[mark]);
    evidence -= Math.log(density) + Math.log(plan);
    evidence -= Math.log(Number.isNaN(index.up[mark]) ? height : Math.min(upright, height));
  }
  const rough = roughPose(index, reflectors, marks);
  if (rough !== null) {
    const { plan, turn, height: tall } = rough.spread;
    const spreads = plan * plan * turn * (tall > 0 ? tall : height * height);
    evidence += 2 * Math.log(TURN) + Math.log(spreads) / 2;
  }
  return { reflectors, marks, pose, matched, weightedSquares, evidence };
}

/**
 * How densely marks lie within a range of a station, a cubic metre, and how thick their layer is: as thick as an even
 * layer that scatters as much.
 */
function surroundingMarks(index: ControlIndex, { east, north }: Pose, range: number) {
  let count = 0;
  let [known, sum, squares] = [0, 0, 0];
  let origin = Number.NaN;
  index.near(east, north, range, (mark) => {
    const away = Math.hypot(index.east[mark] - east, index.north[mark] - north);
    if (!(away <= range)) return;
    count++;
    if (Number.isNaN(index.up[mark])) return;
    if (Number.isNaN(origin)) origin = index.up[mark];
    const up = index.up[mark] - origin;
    known++;
    sum += up;
    squares += up * up;
  });
  const variance = known > 0 ? Math.max(0, squares / known - (sum / known) ** 2) : 0;
  const height = Math.sqrt(12 * (variance + index.worstVertical ** 2));
  return { density: Math.max(count, 1) / (Math.PI * range * range * height), height };
}
