import Type from 'typebox';
import { angle, choice, coordinate, length, named, object, pair, point, varying } from './schema-parts.ts';

/** The part of a case's schema that states the drawing: typed shapes or a file. */

/** Where s = 0 shall be: the nearest place of the shape to this point. */
const mark = Type.Optional(point);

export const shape = Type.Union(
  [
    object({ path: Type.String({ description: 'SVG path data' }), mark }, '{ "path": "M 0 0 H 1 V 1 Z" }'),
    object({ circle: point, radius: length('a radius'), mark }, '{ "circle": [x, y], "radius": 0.5 }'),
    object(
      {
        rectangle: Type.Unsafe<[number | string, number | string, number | string, number | string]>({
          type: 'array',
          prefixItems: [coordinate, coordinate, coordinate, coordinate],
          items: false,
          minItems: 4,
          description: 'two corners [x0, y0, x1, y1]',
        }),
        mark,
      },
      '{ "rectangle": [x0, y0, x1, y1] }',
    ),
    object(
      {
        ellipse: point,
        radii: pair(length('a radius'), 'two radii [a, b]'),
        turned: Type.Optional(angle),
        mark,
      },
      '{ "ellipse": [x, y], "radii": [a, b] }',
    ),
    object(
      { polygon: Type.Array(point, { minItems: 3, description: 'three or more points [[x, y], …]' }), mark },
      '{ "polygon": [[x, y], …] }',
    ),
    object(
      { line: Type.Array(point, { minItems: 2, description: 'two or more points [[x, y], …]' }), mark },
      '{ "line": [[x, y], …] }',
    ),
  ],
  {
    description:
      'a shape: { "path": … }, { "circle": …, "radius": … }, { "rectangle": … }, { "ellipse": …, "radii": … }, { "polygon": … } or { "line": … }',
  },
);

const shapeOrName = Type.Union([Type.String(), shape], {
  description:
    'the name of a shape in the drawing file, or a shape such as { "circle": [x, y], "radius": 0.5 }',
});

const tolerance = Type.Optional(length('the gap to be closed'));
const depth = Type.Optional(varying('a depth such as "0.1 mm"'));
const up = Type.Optional(choice(['up', 'down'], 'whether y grows "up" or "down" in the drawing'));

const typedDrawing = object(
  {
    y: up,
    outline: shape,
    holes: Type.Optional(named(shape, 'holes by name')),
    innerWalls: Type.Optional(named(shape, 'inner walls by name')),
    regions: Type.Optional(named(shape, 'regions by name')),
    tolerance,
    depth,
  },
  'a drawing of typed shapes with an outline',
);

const textOrTexts = (description: string) =>
  Type.Union([Type.String(), Type.Array(Type.String())], { description });

const fileDrawing = object(
  {
    file: Type.String({
      description: 'a .svg, .geojson or .wkt file beside the case, such as "chamber.svg"',
    }),
    take: Type.Optional(textOrTexts('the layer or layers to take, by name')),
    y: up,
    outline: Type.Optional(shapeOrName),
    holes: Type.Optional(named(shapeOrName, 'holes by name')),
    innerWalls: Type.Optional(named(shapeOrName, 'inner walls by name')),
    regions: Type.Optional(named(shapeOrName, 'regions by name')),
    ignore: Type.Optional(textOrTexts('names of shapes to leave out')),
    scale: Type.Optional(
      object(
        {
          between: pair(
            pair(Type.Number(), 'a point as written in the file [x, y]'),
            'two points of the file',
          ),
          is: length('the true length between them,'),
        },
        'a scale: { "between": [[10, 20], [610, 20]], "is": "1.20 mm" }',
      ),
    ),
    tolerance,
    depth,
  },
  'a drawing file: { "file": "chamber.svg" }',
);

export const drawing = Type.Union([typedDrawing, fileDrawing], {
  description: 'a drawing: { "outline": { "rectangle": [0, 0, 1, 1] } } or { "file": "chamber.svg" }',
});
