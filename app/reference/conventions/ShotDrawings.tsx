import { Drawing, Pointer, Word } from './Drawing';

const GROUND = 'M0 150h300';

export function HeightsDrawing() {
  return (
    <Drawing label="The instrument height runs from the mark up to the axis, the target height from its mark up to the prism.">
      <path d={GROUND} stroke="var(--rule-strong)" strokeWidth="1.6" />
      <path d="M60 150L48 150 60 74 72 150Z" fill="none" stroke="var(--ink)" strokeWidth="1.6" />
      <rect x="50" y="56" width="20" height="20" fill="var(--sheet)" stroke="var(--ink)" strokeWidth="2.2" />
      <circle cx="60" cy="66" r="3.4" fill="var(--mark)" />
      <path d="M240 150V50" stroke="var(--ink)" strokeWidth="2" />
      <path d="M240 38l9 12-9 12-9-12Z" fill="var(--sheet)" stroke="var(--ink)" strokeWidth="2" />
      <path d="M60 66L240 50" stroke="var(--ink-third)" strokeDasharray="4 4" />
      <Pointer from={[30, 150]} to={[30, 66]} colour="var(--mark)" />
      <Word x={76} y={126}>
        instrument height
      </Word>
      <Pointer from={[270, 150]} to={[270, 50]} colour="var(--mark)" />
      <Word x={232} y={92} anchor="end">
        target height
      </Word>
      <Word x={60} y={170} anchor="middle" strong>
        mark
      </Word>
      <Word x={240} y={170} anchor="middle" strong>
        mark
      </Word>
    </Drawing>
  );
}

export function PrismDrawing() {
  return (
    <Drawing label="The distance that was read runs past the mark; the constant, here minus 30 millimetres, brings it back.">
      <path d="M212 34v108" stroke="var(--ink)" strokeWidth="2" />
      <Word x={212} y={162} anchor="middle" strong>
        mark
      </Word>
      <path d="M186 52h44v48h-44Z" fill="none" stroke="var(--ink)" strokeWidth="1.8" />
      <path d="M186 52L242 76 186 100" fill="none" stroke="var(--ink-third)" />
      <Pointer from={[20, 76]} to={[242, 76]} />
      <Word x={24} y={68}>
        as read
      </Word>
      <Pointer from={[242, 118]} to={[212, 118]} colour="var(--mark)" />
      <Word x={248} y={122}>
        −30 mm
      </Word>
    </Drawing>
  );
}

export function ResidualDrawing() {
  return (
    <Drawing label="An arrow from the published mark to where it was shot.">
      <path d="M110 112l-13 22h26Z" fill="none" stroke="var(--ink)" strokeWidth="2" />
      <circle cx="110" cy="127" r="2" fill="var(--ink)" />
      <Word x={88} y={134} anchor="end">
        published
      </Word>
      <Pointer from={[110, 127]} to={[196, 66]} colour="var(--mark)" />
      <Word x={202} y={62} strong>
        as shot
      </Word>
      <path d="M110 127H196V66" fill="none" stroke="var(--ink-third)" strokeDasharray="3 3" />
      <Word x={153} y={145} anchor="middle">
        + east
      </Word>
      <Word x={202} y={102}>
        + north
      </Word>
    </Drawing>
  );
}
