import { describe, expect, it } from 'vitest';
import { atmosphericPpm, groupRefractivity, refractivity } from '@/lib/compute/survey/atmosphere';
import { trueSlopeDistance } from '@/lib/compute/survey/distance';
import { toKelvin, toPascal } from '@/lib/compute/units/convert';

function air(celsius: number, hPa: number, percent: number) {
  return { temperature: toKelvin(celsius, 'C'), pressure: toPascal(hPa, 'hPa'), humidity: percent / 100 };
}

// Geoscience Australia, open geodesy library, tutorial 'EDM Corrections'; IAG/IUGG 1999 closed formula after Rüeger.
// Carrier 0.658 µm, modulation 99902213 Hz, unit length 1.5 m; 26 °C, 1010.8 hPa, 37 %; 145.265 m.
describe('first velocity correction of Geoscience Australia’s tutorial', () => {
  const speedOfLight = 299792458;
  const C = (speedOfLight / (2 * 99902213 * 1.5) - 1) * 1e6;

  it('has the printed instrument constants C = 286.3433 and D = 80.6752', () => {
    expect(C).toBeCloseTo(286.3433, 4);
    expect((273.15 / 1013.25) * groupRefractivity(0.658e-6)).toBeCloseTo(80.6752, 4);
  });

  it('corrects 145.265 m by the printed 2.0656 mm', () => {
    const ppm = atmosphericPpm(air(26, 1010.8, 37), 0.658e-6, C);
    const reading = { prismConstantMm: 0, prismConstantAppliedMm: 0, appliedPpm: 0 };
    const corrected = trueSlopeDistance({ slopeDistance: 145.265, ...reading }, ppm);
    expect(Math.abs(corrected - 145.265 - 0.0020656)).toBeLessThan(1e-6);
    expect(Math.abs(corrected - 145.2670656)).toBeLessThan(1e-6);
  });
});

// Coefficients of the IUGG/IAG resolution of 1999 (working party report, Travaux 1999,
// iag.dgfi.tum.de/media/archives/Travaux_99/wp51.htm), evaluated with numpy.
describe('closed formula of the IUGG/IAG resolution of 1999', () => {
  it.each([
    [633, 300.2345],
    [658, 299.2646],
    [850, 294.5092],
    [905, 293.6832],
    [910, 293.6156],
  ])('at %i nm the group refractivity of standard air is %f', (nanometres, expected) => {
    expect(Math.abs(groupRefractivity(nanometres * 1e-9) - expected)).toBeLessThan(1e-4);
  });

  it.each([
    [12, 1013.25, 60, 286.3381],
    [20, 1013.25, 60, 278.3081],
    [30, 950, 80, 251.5551],
  ])('at %f °C, %f hPa and %f %% the refractivity at 658 nm is %f', (celsius, hPa, percent, expected) => {
    expect(Math.abs(refractivity(air(celsius, hPa, percent), 658e-9) - expected)).toBeLessThan(1e-4);
  });
});
