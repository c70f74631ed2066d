import {
  BufferAttribute,
  BufferGeometry,
  Camera,
  DataTexture,
  DoubleSide,
  LineSegments,
  Mesh,
  NearestFilter,
  NoBlending,
  NormalBlending,
  RGBAFormat,
  Scene,
  ShaderMaterial,
  Vector3,
  WebGLRenderer,
} from 'three';
import { fromHex } from '../colour/oklab.ts';
import { bandColours, type Scheme } from '../colour/ramp.ts';
import type { Bands } from '../words/nice-steps.ts';
import { borderLoops, type Field, nodeGradients } from './field.ts';
import type { Projection } from './projection.ts';
import { LINE_FRAGMENT, LINE_VERTEX, SURFACE_FRAGMENT, SURFACE_VERTEX } from './shaders.ts';

/** How the field is banded: step in the case's time unit. */
export type CaseBands = Bands;

/** The surface, its rim and its uprights on the graphics card. Nothing is rebuilt while the lift moves. */
export class PlanScene {
  readonly #renderer: WebGLRenderer;
  readonly #scene = new Scene();
  readonly #camera = new Camera();
  readonly #surface: ShaderMaterial;
  readonly #lines: { readonly material: ShaderMaterial; readonly object: LineSegments; fromLift: boolean }[] =
    [];
  readonly #bands: CaseBands;

  /**
   * @param fullRise height of the longest time over the longest time when fully lifted, length per time
   * @throws {Error} when the browser gives no WebGL context
   */
  constructor(canvas: HTMLCanvasElement, field: Field, bands: CaseBands, fullRise: number) {
    // Kept drawing buffer: a screenshot or a print may come long after the last frame.
    this.#renderer = new WebGLRenderer({ canvas, alpha: true, antialias: true, preserveDrawingBuffer: true });
    this.#renderer.setClearColor(0x000000, 0);
    this.#bands = bands;
    this.#surface = new ShaderMaterial({
      vertexShader: SURFACE_VERTEX,
      fragmentShader: SURFACE_FRAGMENT,
      side: DoubleSide,
      blending: NoBlending,
      uniforms: {
        bands: { value: null },
        bandCount: { value: bands.count },
        pixels: { value: 1 },
        lift: { value: 0 },
        riseOfStep: { value: 0 },
        lightInk: { value: new Vector3(1, 1, 1) },
        darkInk: { value: new Vector3(0.08, 0.11, 0.16) },
      },
    });
    const surface = new Mesh(surfaceGeometry(field, bands, fullRise), this.#surface);
    surface.frustumCulled = false;
    this.#scene.add(surface);
    const loops = borderLoops(field);
    this.#addLines(rimGeometry(field, bands, loops), 0.9, 0.004);
    this.#addLines(uprightGeometry(field, bands, loops), 0.42, 0);
  }

  #addLines(geometry: BufferGeometry, strength: number, nearer: number): void {
    const material = new ShaderMaterial({
      vertexShader: LINE_VERTEX,
      fragmentShader: LINE_FRAGMENT,
      transparent: true,
      premultipliedAlpha: true,
      blending: NormalBlending,
      depthWrite: false,
      uniforms: {
        ink: { value: new Vector3() },
        strength: { value: strength },
        nearer: { value: nearer },
        riseOfStep: { value: 0 },
      },
    });
    const object = new LineSegments(geometry, material);
    object.frustumCulled = false;
    this.#lines.push({ material, object, fromLift: true });
    this.#scene.add(object);
  }

  /** Takes over the colours of a scheme. */
  paint(scheme: Scheme, ink: string): void {
    const colours = bandColours(scheme, this.#bands.count);
    const bytes = new Uint8Array(4 * colours.length);
    colours.forEach((rgb, i) => {
      bytes.set([...rgb.map((channel) => Math.round(channel * 255)), 255], 4 * i);
    });
    const texture = new DataTexture(bytes, colours.length, 1, RGBAFormat);
    texture.magFilter = NearestFilter;
    texture.minFilter = NearestFilter;
    texture.needsUpdate = true;
    this.#surface.uniforms['bands']?.value?.dispose?.();
    setUniform(this.#surface, 'bands', texture);
    for (const { material } of this.#lines) setUniform(material, 'ink', new Vector3(...fromHex(ink)));
  }

  /** Draws one frame. `size` in px of the page, `pixels` device px per px. */
  draw(view: Projection, size: readonly [number, number], pixels: number): void {
    this.#renderer.setPixelRatio(pixels);
    this.#renderer.setSize(size[0], size[1], false);
    this.#camera.projectionMatrix.fromArray(view.clip);
    this.#camera.projectionMatrixInverse.copy(this.#camera.projectionMatrix).invert();
    const riseOfStep = view.rise * this.#bands.step;
    setUniform(this.#surface, 'pixels', pixels);
    setUniform(this.#surface, 'lift', view.lift);
    setUniform(this.#surface, 'riseOfStep', riseOfStep);
    for (const { material, object } of this.#lines) {
      setUniform(material, 'riseOfStep', riseOfStep);
      object.visible = view.lift > 0;
    }
    this.#renderer.render(this.#scene, this.#camera);
  }

  /** Gives everything back to the graphics card. */
  dispose(): void {
    this.#scene.traverse((object) => {
      if (object instanceof Mesh || object instanceof LineSegments) {
        (object.geometry as BufferGeometry).dispose();
        (object.material as ShaderMaterial).dispose();
      }
    });
    this.#surface.uniforms['bands']?.value?.dispose?.();
    this.#renderer.dispose();
  }
}

function setUniform(material: ShaderMaterial, name: string, value: unknown): void {
  const uniform = material.uniforms[name];
  if (uniform !== undefined) uniform.value = value;
}

function surfaceGeometry(field: Field, bands: CaseBands, fullRise: number): BufferGeometry {
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

function rimGeometry(field: Field, bands: CaseBands, loops: readonly number[][]): BufferGeometry {
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

/** Uprights every 1/170 of the longest side, evenly along each border whatever the mesh does there. */
function uprightGeometry(field: Field, bands: CaseBands, loops: readonly number[][]): BufferGeometry {
  const { nodes, values } = field;
  let [x0, x1, y0, y1] = [Infinity, -Infinity, Infinity, -Infinity];
  for (const node of loops.flat()) {
    x0 = Math.min(x0, nodes[2 * node] ?? 0);
    x1 = Math.max(x1, nodes[2 * node] ?? 0);
    y0 = Math.min(y0, nodes[2 * node + 1] ?? 0);
    y1 = Math.max(y1, nodes[2 * node + 1] ?? 0);
  }
  const apart = Math.max(x1 - x0, y1 - y0) / 170;
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
