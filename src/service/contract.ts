import { type Static, Type } from 'typebox';

/** What the service and the page say to each other. One value is the check, the type and the API text. */

const point = Type.Tuple([Type.Number(), Type.Number()]);
const short = Type.String({ maxLength: 200 });

/** One named or unnamed stretch of wall as the page draws it, in the case's length unit, y upwards. */
export const WallView = Type.Object({
  loop: Type.String(),
  /** Absent for unnamed wall. */
  name: Type.Optional(Type.String()),
  kind: Type.Union([Type.Literal('absorbing'), Type.Literal('reflecting'), Type.Literal('partlyAbsorbing')]),
  /** Reactivity with its unit, for a partly absorbing wall. */
  kappa: Type.Optional(Type.String()),
  /** For an inner wall that lets particles through: with kind 'reflecting', as it catches none. */
  permeability: Type.Optional(Type.String()),
  /** Arc length on the loop at both ends. */
  from: Type.Number(),
  to: Type.Number(),
  /** The stretch itself, chords of the mesh, compartment on the left. */
  points: Type.Array(point),
  /** Share of particles caught per length along the stretch for the start shown, at `points` midpoints; absent if none. */
  flux: Type.Optional(Type.Array(Type.Number())),
});
export type WallView = Static<typeof WallView>;

export const LoopView = Type.Object({
  name: Type.String(),
  role: Type.Union([Type.Literal('outline'), Type.Literal('hole'), Type.Literal('inner wall')]),
  length: Type.Number(),
  /** Where s = 0 is, and the unit vector out of the compartment there. */
  mark: point,
  outward: point,
});
export type LoopView = Static<typeof LoopView>;

export const CaseView = Type.Object({
  id: Type.String(),
  title: Type.String(),
  units: Type.Object({ length: Type.String(), time: Type.String() }),
  layouts: Type.Array(Type.String()),
  reference: Type.String(),
  starts: Type.Array(Type.Object({ name: Type.String(), words: Type.String() })),
  asked: Type.Array(
    Type.Object({ text: Type.String(), start: Type.String(), limit: Type.Optional(Type.String()) }),
  ),
  /** Size of the drawing and its contents, e.g. '1.20 × 0.80 mm, 5 posts'. */
  drawing: Type.String(),
  diffusion: Type.String(),
  healed: Type.Array(Type.String()),
  taken: Type.Array(Type.String()),
  leftOut: Type.Array(Type.String()),
  notAvailable: Type.Array(Type.String()),
  warnings: Type.Array(Type.String()),
});
export type CaseView = Static<typeof CaseView>;

/** The answer for one layout and every start, with what the plan needs; the field itself comes as binary. */
export const LayoutView = Type.Object({
  caseId: Type.String(),
  layout: Type.String(),
  /** answers.json, one object per start. */
  answers: Type.Array(Type.Unknown()),
  loops: Type.Array(LoopView),
  walls: Type.Array(WallView),
  regions: Type.Array(Type.Object({ name: Type.String(), lines: Type.Array(Type.Array(point)) })),
  starts: Type.Array(
    Type.Object({ name: Type.String(), at: Type.Optional(point), region: Type.Optional(Type.String()) }),
  ),
  pins: Type.Array(Type.Object({ name: Type.String(), at: point })),
  /** The start that `flux` of the walls is for; chosen by `?start=`, else the first. */
  start: Type.Optional(Type.String()),
  bounds: Type.Object({ low: point, high: point }),
  longest: Type.Object({ value: Type.Number(), at: point }),
});
export type LayoutView = Static<typeof LayoutView>;

/** The one shape of everything refused or failed, whatever the HTTP status. */
export const ErrorView = Type.Object({
  error: Type.Object({
    code: Type.String(),
    what: Type.String(),
    where: Type.Object({
      at: Type.Optional(Type.Array(point)),
      key: Type.Optional(Type.String()),
      file: Type.Optional(Type.String()),
      line: Type.Optional(Type.Number()),
    }),
    remedy: Type.String(),
  }),
});
export type ErrorView = Static<typeof ErrorView>;

/** A running or ended solve. */
export const JobView = Type.Object({
  id: Type.String(),
  caseId: Type.String(),
  layout: Type.String(),
  state: Type.Union([
    Type.Literal('waiting'),
    Type.Literal('running'),
    Type.Literal('done'),
    Type.Literal('stopped'),
    Type.Literal('failed'),
  ]),
  /** What is being done, in words, and how much of it, 0 to 1. */
  doing: Type.String(),
  done: Type.Number(),
  /** Why it failed; only with state 'failed'. */
  error: Type.Optional(ErrorView.properties.error),
});
export type JobView = Static<typeof JobView>;

/** The body of `POST api/jobs`. */
export const JobRequest = Type.Object(
  { caseId: Type.String({ maxLength: 128 }), layout: Type.String({ maxLength: 1000 }) },
  { additionalProperties: false },
);
export type JobRequest = Static<typeof JobRequest>;

/** A case that comes with the program; `POST api/samples/NAME` opens it. */
export const SampleView = Type.Object({ name: Type.String(), title: Type.String() });
export type SampleView = Static<typeof SampleView>;

/** The body of `POST api/drawings`. */
export const DrawingUpload = Type.Object(
  { svg: Type.String(), name: Type.String({ maxLength: 200 }) },
  { additionalProperties: false },
);
export type DrawingUpload = Static<typeof DrawingUpload>;

/** What a drawing holds, before a case is made of it. */
export const DrawingView = Type.Object({
  shapes: Type.Array(
    Type.Object({
      name: Type.String(),
      closed: Type.Boolean(),
      /** What it is taken as when nothing else is said; absent when it is left out. */
      role: Type.Optional(
        Type.Union([Type.Literal('outline'), Type.Literal('hole'), Type.Literal('inner wall')]),
      ),
      /** Width and height in drawing units. */
      size: point,
    }),
  ),
  /** Length of one drawing unit with its unit; absent when the drawing has no physical size and it must be asked. */
  drawingUnit: Type.Optional(Type.String()),
  notes: Type.Array(Type.String()),
});
export type DrawingView = Static<typeof DrawingView>;

/** A case file, or a drawing with what it does not say itself. */
export const CaseUpload = Type.Union([
  Type.Object(
    {
      case: Type.String(),
      /** Name of the case file, for messages. */
      name: Type.Optional(Type.String({ maxLength: 200 })),
      /** Text of the drawing files that the case names, by that name. */
      files: Type.Optional(Type.Record(Type.String({ maxLength: 200 }), Type.String(), { maxProperties: 8 })),
    },
    { additionalProperties: false },
  ),
  Type.Object(
    {
      svg: Type.String(),
      name: Type.String({ maxLength: 200 }),
      /** Length of one drawing unit with its unit, e.g. '1 mm'; not needed when the drawing has a physical size. */
      drawingUnit: Type.Optional(short),
      length: short,
      time: short,
      /** e.g. '1e-4 mm^2/s' */
      diffusion: short,
      /** Loops that catch; 'all' for every wall. */
      catching: Type.Array(Type.String({ maxLength: 1000 }), { maxItems: 1000 }),
    },
    { additionalProperties: false },
  ),
]);
export type CaseUpload = Static<typeof CaseUpload>;
