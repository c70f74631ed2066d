import type { CaseUpload, DrawingView } from '../../src/service/contract.ts';
import type { GivenFile } from './file-place.ts';

/** Writes a case file for a dropped drawing from what the user said about its shapes. */

export type Role = 'outline' | 'hole' | 'region' | 'inner wall' | 'left out';

/** What the user said, kept when the form is shown again after a refusal. */
export interface TakenForm {
  drawingUnit: string;
  diffusion: string;
  /** One per shape of the drawing. */
  readonly roles: Role[];
  /** Per shape: whether its wall catches. */
  readonly catches: boolean[];
}

/** The form as the service proposes it. */
export function proposedForm(drawing: DrawingView): TakenForm {
  return {
    drawingUnit: '',
    diffusion: '',
    roles: drawing.shapes.map((shape) => shape.role ?? 'left out'),
    catches: drawing.shapes.map(() => false),
  };
}

/** What a shape can be: an open line has no inside. */
export function rolesFor(shape: DrawingView['shapes'][number]): readonly Role[] {
  return shape.closed ? ['outline', 'hole', 'region', 'inner wall', 'left out'] : ['inner wall', 'left out'];
}

/** Gives a shape a role. There is one outline: the one before it is left out. */
export function setRole(form: TakenForm, index: number, role: Role): void {
  if (role === 'outline') {
    form.roles.forEach((known, i) => {
      if (known === 'outline') form.roles[i] = 'left out';
    });
  }
  form.roles[index] = role;
}

/** Whether a shape with this role has a wall that can catch. */
export function isWall(role: Role): boolean {
  return role === 'outline' || role === 'hole' || role === 'inner wall';
}

/** '1 mm' gives 'mm': the unit of length that the case is then written in. */
export function unitOf(text: string): string | undefined {
  return /^\s*[0-9.eE+-]+\s*([a-zµμ]+)\s*$/u.exec(text)?.[1];
}

/** The unit of time in 'mm^2/min'; seconds where none is seen, and the service then says what it misses. */
function timeUnitOf(diffusion: string): string {
  return /\/\s*(ns|us|µs|ms|s|min|h|d)\s*$/u.exec(diffusion)?.[1] ?? 's';
}

const RESERVED = ['outline', 'all', 'everywhere', 'lost'];

/** What is sent, or what is still missing, in words. */
export function uploadOf(file: GivenFile, drawing: DrawingView, form: TakenForm): CaseUpload | string {
  const unitText = drawing.drawingUnit ?? form.drawingUnit.trim();
  const length = unitOf(unitText);
  const named = (role: Role) =>
    drawing.shapes.flatMap(({ name }, i) => (form.roles[i] === role ? [name] : []));
  const [outline] = named('outline');
  if (outline === undefined)
    return 'Say which shape is the outline: the closed line that the particle stays in.';
  if (length === undefined) return 'Say how long one drawing unit is, with its unit: for example 1 mm.';
  if (form.diffusion.trim() === '')
    return 'Say with which D it diffuses, with its unit: for example 1e-4 mm^2/s.';
  const catching = drawing.shapes.flatMap(({ name }, i) => {
    const role = form.roles[i] ?? 'left out';
    return form.catches[i] === true && isWall(role) ? [role === 'outline' ? 'outline' : name] : [];
  });
  if (catching.length === 0)
    return 'Nothing catches it yet: the time would be endless. Mark at least one wall.';
  const regions = named('region');
  const wallName = (loop: string) =>
    RESERVED.includes(loop) || regions.includes(loop) ? `${loop === 'outline' ? 'outer' : loop} wall` : loop;
  const byName = (names: readonly string[]) => Object.fromEntries(names.map((name) => [name, name]));
  const name = /\.svg$/i.test(file.name) ? file.name : `${file.name}.svg`;
  const given = {
    tarry: 1,
    title: name.replace(/\.svg$/i, ''),
    units: { length, time: timeUnitOf(form.diffusion) },
    drawing: {
      file: name,
      outline,
      holes: byName(named('hole')),
      innerWalls: byName(named('inner wall')),
      regions: byName(regions),
      ...(named('left out').length > 0 ? { ignore: named('left out') } : {}),
      ...(drawing.drawingUnit === undefined
        ? {
            scale: {
              between: [
                [0, 0],
                [1, 0],
              ],
              is: unitText,
            },
          }
        : {}),
    },
    particle: { diffusion: form.diffusion.trim() },
    walls: Object.fromEntries(catching.map((loop) => [wallName(loop), { on: loop }])),
    layouts: { 'as drawn': Object.fromEntries(catching.map((loop) => [wallName(loop), 'absorbing'])) },
    starts: {
      ...Object.fromEntries(regions.map((region) => [region, { evenIn: region }])),
      anywhere: { evenIn: 'everywhere' },
    },
  };
  return { case: JSON.stringify(given, null, 2), files: { [name]: file.text } };
}
