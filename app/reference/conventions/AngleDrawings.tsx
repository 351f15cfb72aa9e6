import { Drawing, Pointer, Word } from './Drawing';

export function AxesDrawing() {
  return (
    <Drawing label="North points up, east to the right; an azimuth turns clockwise from north.">
      <Pointer from={[110, 150]} to={[110, 24]} />
      <Word x={110} y={18} anchor="middle" strong>
        N
      </Word>
      <Pointer from={[110, 150]} to={[240, 150]} />
      <Word x={248} y={155} strong>
        E
      </Word>
      <Pointer from={[110, 150]} to={[196, 64]} colour="var(--mark)" />
      <path d="M110 90a60 60 0 0 1 42.4 17.6" fill="none" stroke="var(--mark)" strokeDasharray="3 3" />
      <Word x={134} y={84}>
        azimuth
      </Word>
    </Drawing>
  );
}

export function CircleDrawing() {
  return (
    <Drawing label="From north clockwise to the circle zero is the orientation; from there clockwise to the target is the reading.">
      <circle cx="140" cy="100" r="62" fill="none" stroke="var(--rule-strong)" strokeWidth="1.6" />
      <Pointer from={[140, 100]} to={[140, 20]} />
      <Word x={140} y={15} anchor="middle" strong>
        N
      </Word>
      <path d="M140 100L184 56" stroke="var(--ink)" strokeDasharray="4 4" strokeWidth="1.6" />
      <Word x={190} y={54}>
        circle zero
      </Word>
      <Pointer from={[140, 100]} to={[224, 128]} colour="var(--mark)" />
      <Word x={229} y={132}>
        target
      </Word>
      <path d="M140 60a40 40 0 0 1 28.3 11.7" fill="none" stroke="var(--ink)" strokeWidth="1.4" />
      <path d="M170.8 69.2a43 43 0 0 1 10 44.4" fill="none" stroke="var(--mark)" strokeWidth="1.8" />
      <Word x={130} y={54} anchor="end">
        orientation
      </Word>
      <Word x={188} y={96}>
        reading
      </Word>
    </Drawing>
  );
}

export function FacesDrawing() {
  return (
    <Drawing label="Zenith is 0 degrees; a level sight is 90 degrees on face left and 270 degrees on face right.">
      <path d="M24 110H276" stroke="var(--rule-strong)" />
      <Pointer from={[150, 110]} to={[150, 26]} />
      <Word x={158} y={34} strong>
        0°
      </Word>
      <Pointer from={[150, 110]} to={[262, 110]} colour="var(--mark)" />
      <Word x={262} y={100} anchor="end" strong>
        90°
      </Word>
      <Word x={262} y={130} anchor="end">
        face left
      </Word>
      <Pointer from={[150, 110]} to={[38, 110]} />
      <Word x={38} y={100} strong>
        270°
      </Word>
      <Word x={38} y={130}>
        face right
      </Word>
      <path d="M150 62a48 48 0 0 1 48 48" fill="none" stroke="var(--mark)" strokeDasharray="3 3" />
    </Drawing>
  );
}
