import { describe, expect, it } from 'vitest';
import { fromMetres, toDegrees, toRadians } from '@/lib/compute/units/convert';
import { parseDms } from '@/lib/compute/units/dms';
import { ANGLE } from '@/lib/compute/units/table';

// By definition 400 gon = 360° (from memory).
describe('gon and degrees', () => {
  it('100.3498 gon are 90.31482°', () => {
    expect(toDegrees(toRadians(100.3498, 'gon'))).toBeCloseTo(90.31482, 6);
  });

  it('127°10′25.07″ are 141.304034 gon', () => {
    expect(parseDms('127d10\'25.07"')! / ANGLE.gon).toBeCloseTo(141.304034, 6);
  });
});

// NOAA/NGS coordinate conversion tool, documented sample result; feet as of Federal Register, 24 FR 5348 (1959):
// U.S. survey foot 1200/3937 m, international foot 0.3048 m.
describe('the two feet', () => {
  it('76470.3907 m are 250886.607 U.S. survey feet', () => {
    expect(fromMetres(76470.3907, 'ftUS')).toBeCloseTo(250886.607, 3);
  });

  it('76470.3907 m are 250887.109 international feet', () => {
    expect(fromMetres(76470.3907, 'ft')).toBeCloseTo(250887.109, 3);
  });
});
