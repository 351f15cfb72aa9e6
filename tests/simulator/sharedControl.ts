import { between, type Chance, wholeBetween } from './chance';
import { type Observed, observe, type PublishedMark, type TrueMark } from './observe';
import { randomInstrument, randomSite } from './randomSite';

/** Marks that many setups share, published once and for all. */
export interface SharedControl {
  marks: TrueMark[];
  published: PublishedMark[];
}

/** Five to eight marks around a pad of some 250 m, known to 1 to 3 mm. */
export function sharedControl(chance: Chance): SharedControl {
  const { marks: some } = randomSite(chance, { marks: [5, 8], allRound: true });
  const marks = some.map((mark) => ({
    ...mark,
    horizontalSigma: between(chance, 0.001, 0.003),
    verticalSigma: between(chance, 0.001, 0.003),
  }));
  const off = (sigma: number) => sigma * chance.normal();
  const published = marks.map(
    ({ name, easting, northing, height, horizontalSigma, verticalSigma }): PublishedMark => ({
      name,
      easting: easting + off(horizontalSigma),
      northing: northing + off(horizontalSigma),
      elevation: height + off(verticalSigma),
      horizontalSigma,
      verticalSigma,
    }),
  );
  return { marks, published };
}

/** A mark pushed so far in any direction, level or not. */
export function pushed(control: SharedControl, size: number, chance: Chance) {
  const index = wholeBetween(chance, 0, control.marks.length - 1);
  const azimuth = between(chance, 0, 2 * Math.PI);
  const dip = between(chance, -0.5, 0.5);
  const shift = {
    easting: size * Math.cos(dip) * Math.sin(azimuth),
    northing: size * Math.cos(dip) * Math.cos(azimuth),
    height: size * Math.sin(dip),
  };
  const marks = control.marks.map((mark, i) =>
    i !== index
      ? mark
      : {
          ...mark,
          easting: mark.easting + shift.easting,
          northing: mark.northing + shift.northing,
          height: mark.height + shift.height,
        },
  );
  return { name: control.marks[index].name, shift, control: { ...control, marks } };
}

/** A setup somewhere among the marks that sees some of them, in both faces, with an instrument of its own. */
export function setupAmong(control: SharedControl, sees: number, chance: Chance): Observed {
  const chosen = new Set<TrueMark>();
  while (chosen.size < sees) chosen.add(control.marks[wholeBetween(chance, 0, control.marks.length - 1)]);
  const marks = control.marks.filter((mark) => chosen.has(mark));
  const site = randomSite(chance, { marks: [sees, sees] });
  const middle = (of: (mark: TrueMark) => number) =>
    control.marks.reduce((sum, mark) => sum + of(mark), 0) / control.marks.length;
  const station = {
    easting: middle(({ easting }) => easting) + between(chance, -60, 60),
    northing: middle(({ northing }) => northing) + between(chance, -60, 60),
    height: middle(({ height }) => height) + between(chance, 0, 5),
  };
  const observed = observe(
    { ...site, station, marks },
    randomInstrument(chance),
    { faces: ['left', 'right'], sets: 1 },
    chance,
  );
  const published = control.published.filter(({ name }) => marks.some((mark) => mark.name === name));
  return { ...observed, published };
}
