/** What may be wrong with a setup, one thing at a time; `unexplained` is none of the others, and not nothing. */
export type Fault =
  | 'none'
  | 'distanceConstant'
  | 'distanceScale'
  | 'targetsSwapped'
  | 'targetMoved'
  | 'heightOfTargetOrMark'
  | 'singleFace'
  | 'stationMoved'
  | 'instrumentHeight'
  | 'wrongFoot'
  | 'instrumentMoved'
  | 'unexplained';
