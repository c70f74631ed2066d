import Type, { type Static, type TSchema } from 'typebox';

/** Builders of the case's schema: objects that refuse unknown keys, maps by name, values with units. */

/** Names to entries; `note` and `source` beside them are texts (see `entriesOf`). */
export interface Named<T> {
  readonly [name: string]: T;
}

export const noted = {
  note: Type.Optional(Type.String({ description: 'a text for people; it reaches the record' })),
  source: Type.Optional(
    Type.String({ description: 'a text that says where this is from; it reaches the record' }),
  ),
};

export const object = <P extends Record<string, TSchema>>(properties: P, description: string) =>
  Type.Object({ ...properties, ...noted }, { additionalProperties: false, description });

export const named = <S extends TSchema>(entry: S, description: string) =>
  Type.Unsafe<Named<Static<S>>>(Type.Object(noted, { additionalProperties: entry, description }));

export const pair = <S extends TSchema>(entry: S, description: string) =>
  Type.Unsafe<[Static<S>, Static<S>]>({
    type: 'array',
    prefixItems: [entry, entry],
    items: false,
    minItems: 2,
    description,
  });

export const choice = <const T extends readonly string[]>(values: T, description: string) =>
  Type.Unsafe<T[number]>({ type: 'string', enum: values, description });

export const numberOrText = (description: string) =>
  Type.Union([Type.Number(), Type.String()], { description });

const within = (entry: TSchema) =>
  Type.Optional(
    Type.Union([Type.String(), pair(entry, 'two values [low, high]')], {
      description: 'how well the value is known: "10 %", "half to double" or [low, high]',
    }),
  );

export const statedProperties = (what: string) => ({
  value: numberOrText(what),
  within: within(numberOrText(what)),
});

/** A value, a text with a unit, or either with how well it is known. */
export const quantity = (what: string) =>
  Type.Union([Type.Number(), Type.String(), object(statedProperties(what), what)], { description: what });

export const expression = object(
  {
    expression: Type.String({
      description: 'an expression in x and y such as "1e-4*(1 + x)" (syntax of mathjs)',
    }),
    unit: Type.Optional(Type.String({ description: 'the unit of the expression, such as "mm^2/s"' })),
    within: Type.Optional(Type.String({ description: 'how well it is known: "10 %" or "half to double"' })),
  },
  'an expression: { "expression": "1e-4*(1 + x)", "unit": "mm^2/s" }',
);

export const varying = (what: string) =>
  Type.Union([Type.Number(), Type.String(), object(statedProperties(what), what), expression], {
    description: what,
  });

export const coordinate = numberOrText('a length such as 0.5 or "0.5 mm"');
export const length = (what: string) => numberOrText(`${what} such as 0.5 or "0.5 mm"`);
export const point = pair(coordinate, 'a point [x, y]');
export const angle = numberOrText('an angle in degrees such as 30 or "30 deg"');

/** The entries of a map by name, without its `note` and `source`. */
export function entriesOf<T>(map: Named<T> | undefined): [name: string, entry: T][] {
  return Object.entries(map ?? {}).filter(([name]) => name !== 'note' && name !== 'source');
}
