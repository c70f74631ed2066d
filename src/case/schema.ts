import Type, { type Static } from 'typebox';
import { drawing, type shape } from './drawing-schema.ts';
import {
  angle,
  choice,
  expression,
  length,
  type Named,
  named,
  noted,
  numberOrText,
  object,
  pair,
  point,
  quantity,
  statedProperties,
  varying,
} from './schema-parts.ts';

/**
 * The JSON Schema (draft 2020-12) of a case file, which is also the check and the type of what is read. Every
 * `description` completes "Give …" in a refusal and is what an editor shows.
 */

const D = 'a diffusion coefficient such as "1e-4 mm^2/s" (dX = b dt + σ dW has D = σ²/2)';

const diffusion = Type.Union(
  [
    varying(D),
    object(
      { tensor: pair(pair(varying(D), 'a row of two'), 'two rows') },
      '{ "tensor": [[Dxx, Dxy], [Dxy, Dyy]] }',
    ),
    object(
      { principal: pair(varying(D), 'two values'), turned: Type.Optional(angle) },
      '{ "principal": [D1, D2], "turned": "30 deg" }',
    ),
  ],
  { description: D },
);

const drift = Type.Union(
  [
    object(
      { x: varying('a speed such as "2e-3 mm/s"'), y: varying('a speed such as "2e-3 mm/s"') },
      '{ "x": …, "y": … }',
    ),
    object(
      { potential: varying('{ "expression": "x^2", "unit": "1" }, V/kT without a dimension') },
      '{ "potential": { "expression": "x^2", "unit": "1" } }',
    ),
  ],
  {
    description:
      'a drift: { "x": "2e-3 mm/s", "y": 0 } or { "potential": { "expression": "x^2", "unit": "1" } }',
  },
);

const loss = varying('a rate such as "0.01 1/s"');

const particle = object(
  {
    diffusion,
    diffusionIn: Type.Optional(named(diffusion, 'diffusion coefficients by region')),
    noise: Type.Optional(
      choice(
        ['ito', 'stratonovich', 'isothermal'],
        'how noise is read: "ito", "stratonovich" or "isothermal"',
      ),
    ),
    drift: Type.Optional(drift),
    driftIn: Type.Optional(named(drift, 'drifts by region')),
    loss: Type.Optional(loss),
    lossIn: Type.Optional(named(loss, 'loss rates by region')),
  },
  'a particle with its "diffusion"',
);

const extent = {
  from: Type.Optional(length('an arc length')),
  to: Type.Optional(length('an arc length')),
  near: Type.Optional(point),
  width: Type.Optional(length('a width')),
  angles: Type.Optional(pair(angle, 'two angles [from, to] in degrees, counter-clockwise')),
  where: Type.Optional(Type.String({ description: 'a condition on x and y such as "x < 0.5"' })),
};

const wall = object(
  {
    on: Type.String({ description: 'the name of a loop or inner wall, "outline" or "all"' }),
    ...extent,
    mark: Type.Optional(point),
    as: Type.Optional(choice(['pad', 'opening'], '"pad" (caught there) or "opening" (left through it)')),
  },
  'a wall: { "on": "outline", "from": 0, "to": 0.5 }',
);

const kappa = 'a reactivity such as "2e-3 mm/s", or make the wall "reflecting"';
const permeability = 'a permeability such as "1e-4 mm/s", or make the wall "reflecting"';

const onPart = (what: string) =>
  Type.Union([Type.Number(), Type.String(), object({ ...statedProperties(what), ...extent }, what)], {
    description: what,
  });

const kinds =
  '"absorbing", "reflecting", { "partlyAbsorbing": "2e-3 mm/s" } or, for an inner wall, { "permeable": "1e-4 mm/s" }';

const kind = Type.Union(
  [
    choice(['absorbing', 'reflecting'], kinds),
    object(
      { absorbing: object(extent, 'the part that absorbs: { "near": [x, y], "width": 0.2 }') },
      '{ "absorbing": { "near": [x, y], "width": 0.2 } }',
    ),
    object({ partlyAbsorbing: onPart(kappa) }, '{ "partlyAbsorbing": "2e-3 mm/s" }'),
    object({ permeable: onPart(permeability) }, '{ "permeable": "1e-4 mm/s" }'),
    object({ floor: quantity('a reactivity such as "2e-3 mm/s"') }, '{ "floor": "2e-3 mm/s" } for a region'),
  ],
  { description: kinds },
);

const layout = Type.Unsafe<Named<Static<typeof kind>> & { readonly without?: readonly string[] }>(
  Type.Object(
    {
      without: Type.Optional(Type.Array(Type.String(), { description: 'names of holes to leave out' })),
      ...noted,
    },
    {
      additionalProperties: kind,
      description: 'walls by name with what they do: { "left pad": "absorbing" }',
    },
  ),
);

const start = Type.Union(
  [
    object(
      { evenIn: Type.String({ description: 'the name of a region, or "everywhere"' }) },
      '{ "evenIn": "everywhere" }',
    ),
    object({ point }, '{ "point": [x, y] }'),
    object({ spot: point, radius: length('a radius') }, '{ "spot": [x, y], "radius": 0.03 }'),
    object(
      {
        density: Type.Union([Type.String(), expression], {
          description: 'an expression such as "exp(-x^2)"',
        }),
      },
      '{ "density": "exp(-x^2)" }',
    ),
    object(
      { table: Type.String({ description: 'a CSV file with x, y and weight' }) },
      '{ "table": "starts.csv" }',
    ),
  ],
  {
    description:
      'a start: { "evenIn": "everywhere" }, { "point": [x, y] }, { "spot": [x, y], "radius": 0.03 }, { "density": … } or { "table": … }',
  },
);

const figures =
  '"mean", "standard deviation", "median", "time to 95 %", "share of WALL", "share of WALL by 20 min", "time for 50 % to leave by WALL", "still inside at 20 min", "time in REGION" or "decay time"';

const limit = (of: string) => Type.Optional(numberOrText(`a ${of} such as "20 min" or "40 %"`));

const asked = object(
  {
    figure: Type.String({ description: figures }),
    start: Type.Optional(Type.String({ description: 'the name of a start' })),
    under: limit('limit'),
    atLeast: limit('least value'),
    counts: Type.Optional(choice(['gone', 'caught'], '"gone" or "caught"')),
  },
  'what is asked: { "figure": "time to 95 %", "under": "20 min" }',
);

const whole = (minimum: number, maximum: number, description: string) =>
  Type.Optional(Type.Integer({ minimum, maximum, description }));

const accuracy = object(
  {
    bracket: Type.Optional(numberOrText('a relative width such as "0.1 %"')),
    nodes: whole(100, 100_000_000, 'a whole number of nodes from 100'),
    seconds: Type.Optional(
      Type.Number({ exclusiveMinimum: 0, maximum: 1e7, description: 'seconds above 0' }),
    ),
    paths: whole(0, 1_000_000_000, 'a whole number of paths from 0'),
    seed: whole(0, 4_294_967_295, 'a whole number from 0 to 4294967295'),
  },
  'accuracy: { "bracket": "0.1 %", "seconds": 120 }',
);

const report = object(
  {
    survivalAt: Type.Optional(Type.Array(numberOrText('a time such as "1 min"'), { description: 'times' })),
    occupationOf: Type.Optional(Type.Array(Type.String(), { description: 'names of regions' })),
    moments: whole(1, 20, 'a whole number from 1 to 20'),
    field: Type.Optional(Type.Array(Type.String({ description: figures }), { description: 'figures' })),
  },
  'a report: { "survivalAt": ["1 min"] }',
);

/** JSON Schema of a case file. */
export const caseSchema = Type.Object(
  {
    $schema: Type.Optional(Type.String()),
    tarry: Type.Literal(1, { description: '1, the version of the form' }),
    title: Type.Optional(Type.String({ maxLength: 200, description: 'a title of up to 200 characters' })),
    units: Type.Union(
      [
        choice(['none'], '"none"'),
        object(
          {
            length: Type.String({ description: 'a unit of length such as "mm"' }),
            time: Type.String({ description: 'a unit of time such as "s"' }),
          },
          '{ "length": "mm", "time": "s" }',
        ),
      ],
      { description: 'units: { "length": "mm", "time": "s" }, or "none"' },
    ),
    drawing,
    particle,
    walls: named(wall, 'walls by name: { "left pad": { "on": "outline", "from": 0, "to": 0.5 } }'),
    layouts: named(layout, 'layouts by name: { "first": { "left pad": "absorbing" } }'),
    reference: Type.Optional(Type.String({ description: 'the name of a layout' })),
    starts: Type.Optional(named(start, 'starts by name: { "anywhere": { "evenIn": "everywhere" } }')),
    pins: Type.Optional(named(point, 'pins by name: { "centre": [x, y] }')),
    asked: Type.Optional(
      Type.Array(asked, { description: 'a list: [{ "figure": "mean", "under": "20 min" }]' }),
    ),
    accuracy: Type.Optional(accuracy),
    report: Type.Optional(report),
    ...noted,
  },
  {
    $schema: 'https://json-schema.org/draft/2020-12/schema',
    title: 'Tarry case',
    description: 'a case: one object with tarry, units, drawing, particle, walls and layouts',
    additionalProperties: false,
  },
);

/** A case file as written, after the check of its form. */
export type RawCase = Static<typeof caseSchema>;
export type RawDrawing = RawCase['drawing'];
export type RawShape = Static<typeof shape>;
export type RawWall = Static<typeof wall>;
export type RawExtent = Pick<RawWall, 'from' | 'to' | 'near' | 'width' | 'angles' | 'where'>;
export type RawKind = Static<typeof kind>;
export type RawLayout = Static<typeof layout>;
export type RawStart = Static<typeof start>;
export type RawAsked = Static<typeof asked>;
export type RawDiffusion = Static<typeof diffusion>;
export type RawDrift = Static<typeof drift>;
export type RawPoint = Static<typeof point>;
/** Anything that states one value. */
export type RawVarying = Static<typeof loss>;
