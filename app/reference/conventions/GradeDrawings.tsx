import { DeviationMark } from '@/app/ui/draw/DeviationMark';
import { Drawing, Pointer, Word } from './Drawing';

export function LayerDrawing() {
  return (
    <Drawing label="The layer runs under the finish surface by its offset, minus 0.50.">
      <path
        d="M16 66L150 50 284 66"
        fill="none"
        stroke="var(--ink-third)"
        strokeWidth="1.6"
        strokeDasharray="5 4"
      />
      <path d="M16 130L150 114 284 130" fill="none" stroke="var(--ink)" strokeWidth="2.4" />
      <Word x={20} y={54}>
        finish
      </Word>
      <Word x={20} y={150} strong>
        subgrade
      </Word>
      <Pointer from={[150, 52]} to={[150, 113]} colour="var(--mark)" />
      <Word x={158} y={88} strong>
        −0.50 ft
      </Word>
    </Drawing>
  );
}

export function DeviationDrawing() {
  return (
    <Drawing label="Ground over the layer is plus, cut, a diamond; ground under it is minus, fill, a circle.">
      <rect x="16" y="82" width="268" height="26" fill="var(--rule)" />
      <path d="M16 94H284" stroke="var(--ink)" strokeWidth="2.4" />
      <Word x={280} y={78} anchor="end">
        tolerance
      </Word>
      <Word x={280} y={124} anchor="end" strong>
        layer
      </Word>
      <DeviationMark x={70} y={48} high outside size={7} />
      <Word x={86} y={52} strong>
        C 0.11
      </Word>
      <path d="M70 58V93" stroke="var(--cut)" strokeDasharray="3 3" />
      <DeviationMark x={150} y={146} high={false} outside size={7} />
      <Word x={166} y={150} strong>
        F 0.12
      </Word>
      <path d="M150 136V95" stroke="var(--fill)" strokeDasharray="3 3" />
    </Drawing>
  );
}

export function BladeDrawing() {
  return (
    <Drawing label="The edge stands on a benchmark of 412.60 and reads 412.48: minus 0.12. The correction is plus 0.12.">
      <path d="M0 132h300" stroke="var(--rule-strong)" strokeWidth="1.6" />
      <path d="M104 132l-8 14h16Z" fill="none" stroke="var(--ink)" strokeWidth="2" />
      <path
        d="M90 36c-14 30-10 66 8 96h12c-14-30-16-64-6-96Z"
        fill="var(--sheet)"
        stroke="var(--ink)"
        strokeWidth="2"
      />
      <Word x={126} y={128} strong>
        known 412.60
      </Word>
      <path d="M104 158h150" stroke="var(--mark)" strokeDasharray="4 4" />
      <Word x={126} y={174}>
        the edge reads 412.48
      </Word>
      <Pointer from={[268, 158]} to={[268, 133]} colour="var(--mark)" />
      <Word x={262} y={151} anchor="end" strong>
        + 0.12
      </Word>
    </Drawing>
  );
}
