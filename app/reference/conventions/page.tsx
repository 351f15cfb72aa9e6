import type { Metadata } from 'next';
import type { ReactNode } from 'react';
import { Heading } from '@/app/ui/frame/Heading';
import { AxesDrawing, CircleDrawing, FacesDrawing } from './AngleDrawings';
import { BladeDrawing, DeviationDrawing, LayerDrawing } from './GradeDrawings';
import { HeightsDrawing, PrismDrawing, ResidualDrawing } from './ShotDrawings';

export const metadata: Metadata = { title: 'Signs and conventions' };

function Convention({
  title,
  drawing,
  children,
}: {
  title: string;
  drawing: ReactNode;
  children: ReactNode;
}) {
  return (
    <section className="grid gap-x-8 gap-y-4 border-t border-rule py-7 md:grid-cols-[300px_minmax(0,1fr)]">
      <div className="max-w-[300px]">{drawing}</div>
      <div className="max-w-[62ch] space-y-2">
        <h2 className="font-head text-[22px] leading-tight">{title}</h2>
        {children}
      </div>
    </section>
  );
}

export default function ConventionsPage() {
  return (
    <>
      <Heading lead="Which way is plus. Most mistakes on a site are a sign, a unit or a constant; these hold for every request and every answer.">
        Signs and conventions
      </Heading>
      <Convention title="Axes and azimuths" drawing={<AxesDrawing />}>
        <p>
          Coordinates are easting, northing and elevation, each by its name, never by its place in a list.
          Azimuths count from north, clockwise.
        </p>
      </Convention>
      <Convention title="Circle zero" drawing={<CircleDrawing />}>
        <p>
          The horizontal circle counts clockwise. A setup’s orientation is the azimuth of its circle zero:
          azimuth = orientation + reading.
        </p>
      </Convention>
      <Convention title="Zenith angles and faces" drawing={<FacesDrawing />}>
        <p>
          Vertical angles are zenith angles: 0° is straight up. On face left a level sight reads 90°, on face
          right 270°. The face is always said; a reading on the wrong side is refused.
        </p>
      </Convention>
      <Convention title="Heights of instrument and target" drawing={<HeightsDrawing />}>
        <p>
          Both count upwards from the mark to the axis and to the centre of the prism. A target seen on its
          own mark has a height of 0. A setup on no mark has no instrument height: it is null, not 0.
        </p>
      </Convention>
      <Convention title="Prism constants" drawing={<PrismDrawing />}>
        <p>
          The constant is what must be added to a distance; for most prisms it is negative. Say it, and say
          what the instrument has added already: the hub adds the constant minus what was applied. The same
          holds for ppm.
        </p>
      </Convention>
      <Convention title="Residuals and differences" drawing={<ResidualDrawing />}>
        <p>
          As shot minus as published: a residual points from where the mark should be to where it was seen.
          Checks carry the same sign.
        </p>
      </Convention>
      <Convention title="Offset of a layer" drawing={<LayerDrawing />}>
        <p>
          Vertical, signed: −0.50 lies half a foot under its surface. Every answer that depends on a layer
          names the offset, and gives both heights where the surface is the finish.
        </p>
      </Convention>
      <Convention title="Deviation of ground" drawing={<DeviationDrawing />}>
        <p>
          Ground minus layer. Plus is high: cut, written C and drawn as a diamond. Minus is low: fill, written
          F and drawn as a circle. A mark is solid where the reading lies outside the tolerance.
        </p>
      </Convention>
      <Convention title="Bench check of a blade" drawing={<BladeDrawing />}>
        <p>
          Read minus known. Minus means that the edge reads low, and would leave ground high. The correction
          is what is to be added to the edge’s height, with the sign turned. Prove the benchmark by the setup
          before putting it in. None is offered for a gross error, for a difference that is an offset, on a
          mark that is not trusted or was in the setup’s own fit, or from a setup that is not in force.
        </p>
      </Convention>
    </>
  );
}
