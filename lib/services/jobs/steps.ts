/** Steps of all kinds of jobs in plain words. */
export const STEPS: Record<string, string> = {
  gather: 'gathering the observations',
  adjust: 'adjusting the network',
  keep: 'keeping the result',
};
