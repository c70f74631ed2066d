import { BufferAttribute, BufferGeometry } from 'three';
import type { Bands } from '../words/nice-steps.ts';
import { type Field, nodeGradients } from './field.ts';

/** What the graphics card is given, once per layout. Times are in steps of the bands, heights come from the shader. */

/** The surface: place, time in bands and slope at full lift per node. */
export function surfaceGeometry(field: Field, bands: Bands, fullRise: number): BufferGeometry {
  const { nodeCount, nodes, values } = field;
  const position = new Float32Array(3 * nodeCount);
  const time = new Float32Array(nodeCount);
  for (let i = 0; i < nodeCount; i++) {
    position[3 * i] = nodes[2 * i] ?? 0;
    position[3 * i + 1] = nodes[2 * i + 1] ?? 0;
    time[i] = (values[i] ?? 0) / bands.step;
  }
  const slope = nodeGradients(field).map((value) => value * fullRise);
  const geometry = new BufferGeometry();
  geometry.setAttribute('position', new BufferAttribute(position, 3));
  geometry.setAttribute('time', new BufferAttribute(time, 1));
  geometry.setAttribute('slope', new BufferAttribute(slope, 2));
  geometry.setIndex(new BufferAttribute(new Uint32Array(field.triangles), 1));
  return geometry;
}

function lineGeometry(position: number[], time: number[]): BufferGeometry {
  const geometry = new BufferGeometry();
  geometry.setAttribute('position', new BufferAttribute(new Float32Array(position), 3));
  geometry.setAttribute('time', new BufferAttribute(new Float32Array(time), 1));
  return geometry;
}

/** Upright faces from the sheet to the rim of the surface. */
export function curtainGeometry(field: Field, bands: Bands, loops: readonly number[][]): BufferGeometry {
  const position: number[] = [];
  const time: number[] = [];
  for (const loop of loops) {
    loop.forEach((from, i) => {
      const to = loop[(i + 1) % loop.length] ?? from;
      const [high, next] = [(field.values[from] ?? 0) / bands.step, (field.values[to] ?? 0) / bands.step];
      const corners: [number, number][] = [
        [from, 0],
        [to, 0],
        [to, next],
        [from, 0],
        [to, next],
        [from, high],
      ];
      for (const [node, height] of corners) {
        position.push(field.nodes[2 * node] ?? 0, field.nodes[2 * node + 1] ?? 0, 0);
        time.push(height);
      }
    });
  }
  return lineGeometry(position, time);
}

/** The rim of the surface as pairs of ends. */
export function rimGeometry(field: Field, bands: Bands, loops: readonly number[][]): BufferGeometry {
  const position: number[] = [];
  const time: number[] = [];
  for (const loop of loops) {
    loop.forEach((node, i) => {
      for (const end of [node, loop[(i + 1) % loop.length] ?? node]) {
        position.push(field.nodes[2 * end] ?? 0, field.nodes[2 * end + 1] ?? 0, 0);
        time.push((field.values[end] ?? 0) / bands.step);
      }
    });
  }
  return lineGeometry(position, time);
}

/** Uprights every 1/110 of the longest side, evenly along each border whatever the mesh does there. */
export function uprightGeometry(field: Field, bands: Bands, loops: readonly number[][]): BufferGeometry {
  const { nodes, values } = field;
  let [x0, x1, y0, y1] = [Infinity, -Infinity, Infinity, -Infinity];
  for (const node of loops.flat()) {
    x0 = Math.min(x0, nodes[2 * node] ?? 0);
    x1 = Math.max(x1, nodes[2 * node] ?? 0);
    y0 = Math.min(y0, nodes[2 * node + 1] ?? 0);
    y1 = Math.max(y1, nodes[2 * node + 1] ?? 0);
  }
  const apart = Math.max(x1 - x0, y1 - y0) / 110;
  const position: number[] = [];
  const time: number[] = [];
  for (const loop of loops) {
    let next = 0;
    loop.forEach((from, i) => {
      const to = loop[(i + 1) % loop.length] ?? from;
      const [ax, ay] = [nodes[2 * from] ?? 0, nodes[2 * from + 1] ?? 0];
      const [dx, dy] = [(nodes[2 * to] ?? 0) - ax, (nodes[2 * to + 1] ?? 0) - ay];
      const length = Math.hypot(dx, dy);
      for (; next < length; next += apart) {
        const part = next / length;
        const value = (values[from] ?? 0) + part * ((values[to] ?? 0) - (values[from] ?? 0));
        position.push(ax + part * dx, ay + part * dy, 0, ax + part * dx, ay + part * dy, 0);
        time.push(0, value / bands.step);
      }
      next -= length;
    });
  }
  return lineGeometry(position, time);
}
