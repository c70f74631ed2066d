/** Exit statuses of the command line (CASE.md). */
export const status = {
  answered: 0,
  ourFault: 1,
  caseAtFault: 2,
  limitReached: 3,
  stopped: 130,
} as const;
