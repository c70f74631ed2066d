/**
 * What a case may state and this version does not compute yet. It is accepted and told, never refused and never
 * dropped in silence. An issue that computes one of these takes its line out of this table; what depends on it then
 * is no longer held back.
 */
const words = {
  'density start': 'starts by a density',
  'table start': 'starts from a table',
  within: 'what ranges of inputs do to the answers',
  bracket: 'a guaranteed bracket of a given width',
  paths: 'the check by trajectories',
  field: 'fields other than mean and shares',
} as const;

export type NotYet = keyof typeof words;

/**
 * Says that something is not available yet, or undefined when it is.
 *
 * @param what a name of the table; anything else is available
 * @param place where the case asks for it, e.g. `layout "coated post", baffle`
 */
export const notYet = (what: string, place: string): string | undefined =>
  isNotYet(what) ? `${words[what]} (${place}): not available yet` : undefined;

const isNotYet = (what: string): what is NotYet => Object.hasOwn(words, what);
