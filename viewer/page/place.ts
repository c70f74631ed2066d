/** What the address of the page says is open, so that loading it again shows the same. */
export interface Place {
  readonly case: string;
  readonly layout?: string;
  readonly start?: string;
}

/** The place in the fragment of the address; undefined when it names no case. */
export function readPlace(fragment = location.hash): Place | undefined {
  const said = new URLSearchParams(fragment.replace(/^#/, ''));
  const [theCase, layout, start] = ['case', 'layout', 'start'].map((name) => said.get(name) ?? undefined);
  if (theCase === undefined || theCase === '') return undefined;
  return {
    case: theCase,
    ...(layout === undefined ? {} : { layout }),
    ...(start === undefined ? {} : { start }),
  };
}

/** The fragment that names a place. */
export function placeText(place: Place): string {
  return `#${new URLSearchParams(Object.entries(place)).toString()}`;
}

/** Puts the place into the address without a new entry in the history. */
export function writePlace(place: Place | undefined): void {
  history.replaceState(null, '', place === undefined ? location.pathname : placeText(place));
}
