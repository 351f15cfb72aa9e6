import * as z from 'zod';

export const LengthUnit = z.enum(['m', 'ft', 'ftUS']).meta({
  id: 'LengthUnit',
  description: 'Metre, international foot (0.3048 m), U.S. survey foot (1200/3937 m).',
});
export const AngleUnit = z.enum(['deg', 'dms', 'gon', 'rad']).meta({
  id: 'AngleUnit',
  description: '`dms` values are text such as `124-30-15.2`; the others are numbers.',
});
export const TemperatureUnit = z.enum(['C', 'F']).meta({ id: 'TemperatureUnit' });
export const PressureUnit = z.enum(['hPa', 'mmHg', 'inHg']).meta({ id: 'PressureUnit' });
export const VolumeUnit = z.enum(['m3', 'yd3']).meta({ id: 'VolumeUnit' });

/** Units of a submission that carries lengths only. */
export const LengthUnits = z.strictObject({ length: LengthUnit }).meta({ id: 'LengthUnits' });

/** Units of a submission that may carry all of them; each is needed only where a value of its kind is. */
export const SubmissionUnits = z
  .strictObject({
    length: LengthUnit,
    angle: AngleUnit.optional(),
    temperature: TemperatureUnit.optional(),
    pressure: PressureUnit.optional(),
  })
  .meta({ id: 'SubmissionUnits', description: 'No unit is assumed: a value without its unit is refused.' });

/** Units of an answer. */
export const AnswerUnits = z
  .object({ length: LengthUnit, angle: z.literal('deg').optional(), volume: VolumeUnit.optional() })
  .meta({
    id: 'AnswerUnits',
    description: 'Angles are decimal degrees; small ones are in seconds of arc, as named.',
  });

/** `?length=` of every read that answers lengths. */
export const LengthQuery = z.strictObject({
  length: LengthUnit.optional().meta({ description: 'Length unit of the answer; the project’s by default.' }),
});

export const ConfirmUnits = z.boolean().optional().meta({
  description: 'Needed where a submission is in the other foot than the project’s frame.',
});
