/**
 * Area and first moments ∫1, ∫x, ∫y of a triangle's overlap with the disc of the given radius about the origin, exact:
 * each side PQ contributes what lies between it and the origin, a triangle where it runs inside the disc and a sector
 * where it runs outside (Green's theorem).
 *
 * @param corners x, y of three corners, counter-clockwise, relative to the disc's centre
 * @param moments ← ∫1, ∫x, ∫y
 */
export function momentsInDisc(corners: Float64Array, radius: number, moments: Float64Array): void {
  moments.fill(0);
  for (let v = 0; v < 3; v++) {
    const w = v === 2 ? 0 : v + 1;
    addSide(corners[2 * v], corners[2 * v + 1], corners[2 * w], corners[2 * w + 1], radius, moments);
  }
}

/** Cuts one side where it crosses the circle and adds its up to three pieces. */
function addSide(
  px: number,
  py: number,
  qx: number,
  qy: number,
  radius: number,
  moments: Float64Array,
): void {
  const dx = qx - px;
  const dy = qy - py;
  const a = dx * dx + dy * dy;
  const b = px * dx + py * dy;
  const cross = px * dy - py * dx;
  const root = a * radius * radius - cross * cross;
  if (root <= 0) {
    addSector(px, py, qx, qy, radius, moments);
    return;
  }
  const s = Math.sqrt(root);
  const enter = Math.min(1, Math.max(0, (-b - s) / a));
  const leave = Math.min(1, Math.max(0, (-b + s) / a));
  if (leave <= enter) {
    addSector(px, py, qx, qy, radius, moments);
    return;
  }
  const ex = px + enter * dx;
  const ey = py + enter * dy;
  const lx = leave === 1 ? qx : px + leave * dx;
  const ly = leave === 1 ? qy : py + leave * dy;
  if (enter > 0) addSector(px, py, ex, ey, radius, moments);
  const area = 0.5 * (ex * ly - ey * lx);
  moments[0] += area;
  moments[1] += (area * (ex + lx)) / 3;
  moments[2] += (area * (ey + ly)) / 3;
  if (leave < 1) addSector(lx, ly, qx, qy, radius, moments);
}

/** The sector between the directions of P and Q, signed. */
function addSector(
  px: number,
  py: number,
  qx: number,
  qy: number,
  radius: number,
  moments: Float64Array,
): void {
  const angle = Math.atan2(px * qy - py * qx, px * qx + py * qy);
  const p = Math.hypot(px, py);
  const q = Math.hypot(qx, qy);
  const third = radius ** 3 / 3;
  moments[0] += 0.5 * radius * radius * angle;
  moments[1] += third * (qy / q - py / p);
  moments[2] += third * (px / p - qx / q);
}
