import { describe, expect, it } from 'vitest';
import type { CheckDifference } from '@/lib/compute/survey/checkShots';
import type { FittedMark, StationFit } from '@/lib/compute/survey/stationFit';
import { type Axis, judgeSetup, type SetupLimits, type SetupReason } from '@/lib/compute/survey/verdict';

/** Just beyond a limit. */
const HAIR = 1e-9;

const LIMITS: SetupLimits = {
  residual: { horizontal: 0.01, vertical: 0.008 },
  work: { radius: 100, horizontal: 0.03, vertical: 0.02 },
  checkRequired: false,
};
const CHECK_REQUIRED: SetupLimits = { ...LIMITS, checkRequired: true };
const WORK = { horizontal: 0.02, vertical: 0.01 };

function mark(name: string, change: Partial<FittedMark> = {}): FittedMark {
  const reading = {
    set: 1,
    faces: 'both',
    residual: 0.001,
    redundancy: 0.5,
    minimalDetectable: 0.01,
  } as const;
  return {
    name,
    version: 1,
    status: 'trusted',
    published: { easting: 0, northing: 0, elevation: 0 },
    shots: [],
    horizontal: true,
    vertical: true,
    residual: { easting: 0.001, northing: -0.001, elevation: 0.001 },
    readings: [
      { ...reading, kind: 'direction', standardised: 1 },
      { ...reading, kind: 'zenith', standardised: -1 },
      { ...reading, kind: 'distance', standardised: 0.5 },
    ],
    miss: { across: 0.001, along: 0.001, up: 0.001 },
    without: shift(0.002, -0.002),
    stationCovariance: new Float64Array(15),
    ...change,
  };
}

function shift(horizontal: number, vertical: number | null): NonNullable<FittedMark['without']> {
  return { easting: horizontal, northing: 0, horizontal, vertical, orientation: 0 };
}

/** A good fit of three trusted marks, changed where a test wants it. */
function goodFit(change: Partial<StationFit> = {}): StationFit {
  return {
    station: {
      easting: 0,
      northing: 0,
      axis: 0,
      orientation: 0,
      refraction: 0.13,
      covariance: new Float64Array(25),
    },
    heightDetermined: true,
    orientationDetermined: true,
    occupied: null,
    backsights: [],
    danger: null,
    others: [],
    unusedDistances: [],
    directionSets: null,
    converged: true,
    iterations: 3,
    test: { sigma0: 1, degreesOfFreedom: 5, value: 5, lower: 1.1, upper: 11.1, passed: true, low: false },
    scale: 1,
    ellipse95: { semiMajor: 0.004, semiMinor: 0.003, azimuth: 0 },
    marks: [mark('A'), mark('B'), mark('C')],
    geometry: { spread: 4, inside: true },
    faceErrors: null,
    explanations: [],
    ...change,
  };
}

function check(change: Partial<CheckDifference> = {}): CheckDifference {
  return {
    target: 'K',
    version: 1,
    inFit: false,
    status: 'trusted',
    published: { easting: 0, northing: 0, elevation: 0 },
    shots: [],
    difference: { easting: 0.003, northing: 0.004, elevation: 0.002 },
    uncertainty: { horizontal: 0.004, vertical: 0.003 },
    horizontal: 'agreed',
    vertical: 'agreed',
    ...change,
  };
}

const codes = (reasons: readonly SetupReason[]) => reasons.map(({ code }) => code);

function judge(
  changed: Partial<StationFit> = {},
  { limits = LIMITS, checks = [] as CheckDifference[], work = WORK } = {},
) {
  const judged = judgeSetup(goodFit(changed), limits, checks, work);
  return {
    ...judged,
    codes: codes(judged.reasons),
    of: (code: string) => judged.reasons.find((r) => r.code === code),
  };
}

/** One mark changed among three. */
const withMark = (change: Partial<FittedMark>) => ({ marks: [mark('A', change), mark('B'), mark('C')] });

describe('a good fit', () => {
  it('passes, and says what was not checked', () => {
    const { verdict, verdicts, codes: found, of } = judge();
    expect(verdict).toBe('pass');
    expect(verdicts).toEqual({ horizontal: 'pass', vertical: 'pass' });
    expect(found).toEqual(['within_limits', 'not_checked']);
    expect(of('within_limits')).toMatchObject({ marks: 3, radius: 100, ...WORK });
    expect(of('not_checked')).toMatchObject({ independent: ['horizontal', 'vertical'], singleFace: false });
  });

  it('passes with an agreed check and nothing left unchecked', () => {
    expect(judge({}, { checks: [check()] }).codes).toEqual(['within_limits']);
  });

  it('says that one face alone leaves collimation and index unchecked', () => {
    const single = mark('A');
    single.readings[0].faces = 'left';
    const { of } = judge({ marks: [single, mark('B'), mark('C')] }, { checks: [check()] });
    expect(of('not_checked')).toMatchObject({ independent: [], singleFace: true });
  });
});

describe('what fails a setup', () => {
  it('that did not converge, in plan and in height', () => {
    const { verdicts, codes: found } = judge({ converged: false });
    expect(verdicts).toEqual({ horizontal: 'fail', vertical: 'fail' });
    expect(found).toContain('not_converged');
  });

  describe.each([
    ['direction', 0, 'horizontal'],
    ['zenith', 1, 'vertical'],
    ['distance', 2, 'horizontal'],
  ] as const)('|w| of a %s', (kind, index, axis) => {
    const standardised = (w: number) => {
      const { readings } = mark('A');
      readings[index].standardised = w;
      return withMark({ readings });
    };

    it('passes at 3.29, of either sign', () => {
      expect(judge(standardised(3.29)).verdict).toBe('pass');
      expect(judge(standardised(-3.29)).verdict).toBe('pass');
    });

    it(`fails ${axis} beyond`, () => {
      for (const w of [3.29 + HAIR, -3.29 - HAIR]) {
        const { verdict, verdicts, of } = judge(standardised(w));
        expect(verdict).toBe('fail');
        expect(verdicts).toMatchObject({ [axis]: 'fail', [other(axis)]: 'pass' });
        expect(of('observation_outlier')).toMatchObject({
          target: 'A',
          kind,
          value: Math.abs(w),
          limit: 3.29,
        });
      }
    });

    it('is not judged where nothing controls the reading', () => {
      expect(judge(standardised(Number.NaN)).verdict).toBe('pass');
    });
  });

  it('names the mark with the worst reading first', () => {
    const marks = [mark('A'), mark('B'), mark('C')];
    marks[0].readings[0].standardised = 4;
    marks[1].readings[2].standardised = -9;
    expect(judge({ marks }).reasons[0]).toMatchObject({ code: 'observation_outlier', target: 'B' });
  });

  describe.each([
    ['horizontal', { easting: 0.006, northing: -0.008, elevation: 0 }, 0.01],
    ['vertical', { easting: 0, northing: 0, elevation: -0.008 }, 0.008],
  ] as const)('a %s residual', (axis, residual, limit) => {
    it('passes at the limit', () => {
      expect(judge(withMark({ residual })).verdict).toBe('pass');
    });

    it('fails beyond', () => {
      const more = Object.fromEntries(
        Object.entries(residual).map(([part, value]) => [part, value * (1 + 1e-6)]),
      ) as FittedMark['residual'];
      const { verdicts, of } = judge(withMark({ residual: more }));
      expect(verdicts).toMatchObject({ [axis]: 'fail', [other(axis)]: 'pass' });
      expect(of('target_residual_over')).toMatchObject({ axis, target: 'A', limit });
    });
  });

  it('a residual is judged in plan alone where the mark has no elevation', () => {
    const none = { easting: 0.001, northing: 0.001, elevation: null };
    expect(judge(withMark({ vertical: false, residual: none })).verdict).toBe('pass');
  });

  it.each<[Axis]>([['horizontal'], ['vertical']])(
    'a check that is over in the %s, required or not',
    (axis) => {
      for (const limits of [LIMITS, CHECK_REQUIRED]) {
        const { verdict, verdicts, of } = judge({}, { limits, checks: [check({ [axis]: 'over' })] });
        expect(verdict).toBe('fail');
        expect(verdicts[axis]).toBe('fail');
        expect(of('check_over')).toMatchObject({
          axis,
          target: 'K',
          inFit: false,
          limit: LIMITS.residual[axis],
        });
      }
    },
  );

  it('a closing shot on a mark of the fit that is over', () => {
    const { verdict, of } = judge({}, { checks: [check({ inFit: true, horizontal: 'over' })] });
    expect(verdict).toBe('fail');
    expect(of('check_over')).toMatchObject({ inFit: true });
  });

  it('beats what holds it, and of that axis only what is wrong is said', () => {
    const marks = [mark('A', { residual: { easting: 1, northing: 0, elevation: 0 } }), mark('B')];
    const { verdict, verdicts, codes: found } = judge({ marks });
    expect(verdict).toBe('fail');
    expect(verdicts).toEqual({ horizontal: 'fail', vertical: 'pass' });
    expect(found).toEqual(['target_residual_over', 'not_checked']);
  });
});

describe('trusted marks', () => {
  it('three in plan pass, two hold', () => {
    expect(judge().verdict).toBe('pass');
    const { verdicts, of } = judge({ marks: [mark('A'), mark('B')] });
    expect(verdicts).toEqual({ horizontal: 'hold', vertical: 'pass' });
    expect(of('too_few_marks')).toMatchObject({ axis: 'horizontal', count: 2, limit: 3 });
  });

  it('two in height pass, one holds', () => {
    const low = (name: string) => mark(name, { vertical: false });
    expect(judge({ marks: [mark('A'), mark('B'), low('C')] }).verdict).toBe('pass');
    const { verdicts, of } = judge({ marks: [mark('A'), low('B'), low('C')] });
    expect(verdicts).toEqual({ horizontal: 'pass', vertical: 'hold' });
    expect(of('too_few_marks')).toMatchObject({ axis: 'vertical', count: 1, limit: 2 });
  });

  it('suspect marks do not count, in plan or in height', () => {
    const suspect = mark('C', { status: 'suspect' });
    expect(judge({ marks: [mark('A'), mark('B'), suspect] }).of('too_few_marks')).toMatchObject({ count: 2 });
    expect(judge({ marks: [mark('A'), mark('B'), mark('D'), suspect] }).verdict).toBe('pass');
    const few = judge({
      marks: [mark('A'), mark('B', { vertical: false }), mark('D', { vertical: false }), suspect],
    });
    expect(few.verdicts).toEqual({ horizontal: 'pass', vertical: 'hold' });
  });

  it('repeats and second faces of two marks do not make three', () => {
    const twice = (name: string) => mark(name, { readings: [...mark('x').readings, ...mark('x').readings] });
    expect(judge({ marks: [twice('A'), twice('B')] }).codes).toContain('too_few_marks');
  });
});

describe('the solution with a mark removed', () => {
  it.each([
    ['horizontal', { ...shift(0.01, 0), vertical: 0 }],
    ['vertical', { ...shift(0, -0.008), vertical: -0.008 }],
  ] as const)('passes where it moves by the %s limit, and holds beyond', (axis, without) => {
    expect(judge(withMark({ without })).verdict).toBe('pass');
    const more = { ...without, [axis]: without[axis] * (1 + 1e-6) };
    const { verdict, verdicts, of } = judge(withMark({ without: more }));
    expect(verdict).toBe('hold');
    expect(verdicts).toMatchObject({ [axis]: 'hold', [other(axis)]: 'pass' });
    expect(of('single_mark_dominates')).toMatchObject({ axis, target: 'A' });
  });

  it('holds where the others do not determine the station, or its height', () => {
    expect(judge(withMark({ without: null })).verdicts).toEqual({ horizontal: 'hold', vertical: 'hold' });
    const flat = judge(withMark({ without: shift(0, null) }));
    expect(flat.verdicts).toEqual({ horizontal: 'pass', vertical: 'hold' });
    expect(flat.of('single_mark_needed')).toMatchObject({ axis: 'vertical', target: 'A' });
  });

  it('names the mark that moves it most', () => {
    const marks = [0.011, 0.03, 0.02].map((horizontal, i) =>
      mark('ABC'[i], { without: shift(horizontal, 0) }),
    );
    expect(judge({ marks }).of('single_mark_dominates')).toMatchObject({ target: 'B', value: 0.03 });
  });
});

describe('the scatter', () => {
  it('holds plan and height where the χ² test is not passed', () => {
    const failed = { ...goodFit().test, sigma0: 1.6, value: 12.8, passed: false };
    const { verdict, verdicts, of } = judge({ test: failed, scale: 1.6 });
    expect(verdict).toBe('hold');
    expect(verdicts).toEqual({ horizontal: 'hold', vertical: 'hold' });
    expect(of('spread_too_large')).toMatchObject({ value: 1.6, limit: 1 });
  });

  it('holds nothing where it is small', () => {
    const small = { ...goodFit().test, sigma0: 0.2, value: 0.2, low: true };
    expect(judge({ test: small }).verdict).toBe('pass');
  });
});

describe('the accuracy at the working radius', () => {
  it.each([
    ['horizontal', { horizontal: 0.03, vertical: 0.01 }],
    ['vertical', { horizontal: 0.02, vertical: 0.02 }],
  ] as const)('passes at the %s limit, and holds beyond', (axis, work) => {
    expect(judge({}, { work }).verdict).toBe('pass');
    const { verdict, verdicts, of } = judge({}, { work: { ...work, [axis]: work[axis] + HAIR } });
    expect(verdict).toBe('hold');
    expect(verdicts).toMatchObject({ [axis]: 'hold', [other(axis)]: 'pass' });
    expect(of('accuracy_short')).toMatchObject({ axis, limit: LIMITS.work[axis], radius: 100 });
  });

  it('is not asked of a height that the setup does not have', () => {
    const marks = ['A', 'B', 'C'].map((name) => mark(name, { vertical: false }));
    const { codes: found } = judge(
      { marks, heightDetermined: false },
      { work: { horizontal: 0.02, vertical: 9 } },
    );
    expect(found).not.toContain('accuracy_short');
    expect(found).toContain('too_few_marks');
  });
});

describe('a class that requires a check', () => {
  const required = (checks: CheckDifference[], changed: Partial<StationFit> = {}) =>
    judge(changed, { limits: CHECK_REQUIRED, checks });

  it('holds with the single reason check_wanted where nothing else lacks', () => {
    const { verdict, verdicts, reasons } = required([]);
    expect(verdict).toBe('hold');
    expect(verdicts).toEqual({ horizontal: 'hold', vertical: 'hold' });
    expect(reasons).toEqual([{ code: 'check_wanted', axes: ['horizontal', 'vertical'] }]);
  });

  it('passes with an agreed check on a trusted mark outside the fit', () => {
    expect(required([check()]).verdict).toBe('pass');
  });

  it.each<[string, Partial<CheckDifference>]>([
    ['of a mark of the fit', { inFit: true }],
    ['on a suspect mark', { status: 'suspect' }],
  ])('is not satisfied by a check %s', (_, change) => {
    expect(required([check(change)]).reasons).toEqual([
      { code: 'check_wanted', axes: ['horizontal', 'vertical'] },
    ]);
  });

  it('asks for the height where the check gave none, and takes it from a benchmark', () => {
    const flat = check({ vertical: null, difference: { easting: 0, northing: 0, elevation: null } });
    const { verdicts, reasons } = required([flat]);
    expect(verdicts).toEqual({ horizontal: 'pass', vertical: 'hold' });
    expect(reasons).toEqual([{ code: 'check_wanted', axes: ['vertical'] }]);
    expect(required([flat, check({ target: 'BM', horizontal: 'disagrees' })]).verdict).toBe('pass');
  });

  it.each<[CheckDifference['horizontal'], string]>([
    ['disagrees', 'check_disagrees'],
    ['notCapable', 'check_not_capable'],
  ])('holds with a check that %s, and says so', (outcome, code) => {
    for (const axis of ['horizontal', 'vertical'] as const) {
      const { verdict, verdicts, codes: found } = required([check({ [axis]: outcome })]);
      expect(verdict).toBe('hold');
      expect(verdicts).toMatchObject({ [axis]: 'hold', [other(axis)]: 'pass' });
      // It was checked, if in vain: that it was not checked would be wrong beside it.
      expect(found).toEqual([code]);
    }
  });

  it('wants a check in the axis that none was shot for, beside one that disagrees in the other', () => {
    const flat = check({ horizontal: 'disagrees', vertical: null });
    const { reasons, codes: found } = required([flat]);
    expect(found).toEqual(['check_disagrees', 'check_wanted', 'not_checked']);
    expect(reasons[1]).toEqual({ code: 'check_wanted', axes: ['vertical'] });
  });

  it('wants none in the axis where something is wrong', () => {
    const { of } = required([], withMark({ residual: { easting: 1, northing: 0, elevation: 0 } }));
    expect(of('check_wanted')).toEqual({ code: 'check_wanted', axes: ['vertical'] });
  });

  it('says the rest as well where more than the check lacks', () => {
    const { codes: found } = required([], { marks: [mark('A'), mark('B')] });
    expect(found).toEqual(['too_few_marks', 'check_wanted', 'not_checked']);
  });

  it('fails with a check that is over, even beside one that agrees', () => {
    expect(required([check(), check({ target: 'L', vertical: 'over' })]).verdict).toBe('fail');
  });

  it('where none is required, a check that could not tell holds nothing', () => {
    for (const outcome of ['disagrees', 'notCapable'] as const) {
      expect(judge({}, { checks: [check({ horizontal: outcome })] }).verdict).toBe('pass');
    }
  });
});

function other(axis: Axis): Axis {
  return axis === 'horizontal' ? 'vertical' : 'horizontal';
}
