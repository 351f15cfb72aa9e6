/** The table in which a level book comes as `text/csv`: a line each, in the dialect of `controlTable.ts`. */
export const LEVEL_BOOK_COLUMNS = [
  'point',
  'backsight',
  'backsightDistance',
  'intermediate',
  'intermediateDistance',
  'foresight',
  'foresightDistance',
  'bookedElevation',
] as const;

export const LEVEL_BOOK_NEEDED = ['point', 'backsight', 'foresight'] as const;
export const MAX_LEVEL_SIGHTS = 2000;
