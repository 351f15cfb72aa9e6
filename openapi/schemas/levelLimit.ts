import * as z from 'zod';
import { Text } from './primitives';

const factor = z.number().gt(0).max(1000);

export const LevelLimit = z
  .strictObject({
    mmPerRootKm: factor.optional().meta({ description: 'Millimetres times the root of the length in km.' }),
    ftPerRootMile: factor.optional().meta({ description: 'Feet times the root of the length in miles.' }),
    mmPerRootSetup: factor.optional().meta({
      description: 'Millimetres times the root of the number of standings: for runs without distances.',
    }),
    citation: Text.optional().meta({ description: 'The clause it comes from.' }),
  })
  .superRefine(({ mmPerRootKm, ftPerRootMile, mmPerRootSetup }, context) => {
    const given = [mmPerRootKm, ftPerRootMile, mmPerRootSetup].filter((value) => value !== undefined).length;
    if (given === 1) return;
    context.addIssue({
      code: 'custom',
      path: [],
      message: 'A limit is one of mmPerRootKm, ftPerRootMile and mmPerRootSetup.',
      params: { code: given === 0 ? 'one_of_required' : 'mutually_exclusive' },
    });
  })
  .meta({
    id: 'LevelLimit',
    description: 'What a level run may fail to close by.',
    example: { mmPerRootKm: 12, citation: 'third order, common practice' },
  });

const stated = z.number().nullable();

export const StatedLevelLimit = z
  .object({
    mmPerRootKm: stated,
    ftPerRootMile: stated.meta({ description: 'The same in feet and miles.' }),
    mmPerRootSetup: stated,
    citation: z.string().nullable(),
    source: z.enum(['run', 'project', 'default']),
  })
  .meta({
    id: 'StatedLevelLimit',
    description: 'Third order, 12 mm√km or 0.05 ft√mile, where neither run nor project states a limit.',
  });
