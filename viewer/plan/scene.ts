import {
  type BufferGeometry,
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
import { borderLoops, type Field } from './field.ts';
import type { Projection } from './projection.ts';
import { curtainGeometry, rimGeometry, surfaceGeometry, uprightGeometry } from './scene-geometry.ts';
import { LINE_FRAGMENT, LINE_VERTEX, SURFACE_FRAGMENT, SURFACE_VERTEX } from './shaders.ts';

/** The surface, its rim and its uprights on the graphics card. Nothing is rebuilt while the lift moves. */
export class PlanScene {
  readonly #renderer: WebGLRenderer;
  readonly #scene = new Scene();
  readonly #camera = new Camera();
  readonly #surface: ShaderMaterial;
  /** What hangs from the surface: shown as soon as it is lifted. */
  readonly #hanging: { readonly material: ShaderMaterial; readonly object: LineSegments | Mesh }[] = [];
  readonly #curtain: ShaderMaterial;
  readonly #bands: Bands;
  #sized = '';

  /**
   * @param bands step in the case's time unit
   * @param fullRise height of the longest time over the longest time when fully lifted, length per time
   * @throws {Error} when the browser gives no WebGL context
   */
  constructor(canvas: HTMLCanvasElement, field: Field, bands: Bands, fullRise: number) {
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
    this.#curtain = lineMaterial(1, 0);
    const curtain = new Mesh(curtainGeometry(field, bands, loops), this.#curtain);
    curtain.frustumCulled = false;
    this.#hanging.push({ material: this.#curtain, object: curtain });
    this.#scene.add(curtain);
    this.#addLines(rimGeometry(field, bands, loops), 0.9, 0.004);
    this.#addLines(uprightGeometry(field, bands, loops), 0.34, 0.002);
  }

  #addLines(geometry: BufferGeometry, strength: number, nearer: number): void {
    const material = lineMaterial(strength, nearer);
    const object = new LineSegments(geometry, material);
    object.frustumCulled = false;
    this.#hanging.push({ material, object });
    this.#scene.add(object);
  }

  /** Takes over the colours of a scheme. */
  paint(scheme: Scheme, ink: string, sheet: string): void {
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
    for (const { material } of this.#hanging) setUniform(material, 'ink', new Vector3(...fromHex(ink)));
    setUniform(this.#curtain, 'ink', new Vector3(...fromHex(sheet)));
  }

  /** Draws one frame. `size` in px of the page, `pixels` device px per px. */
  draw(view: Projection, size: readonly [number, number], pixels: number): void {
    const wanted = `${size[0]} ${size[1]} ${pixels}`;
    // Setting the size throws the drawing buffer away, even if it is the same size.
    if (wanted !== this.#sized) {
      this.#sized = wanted;
      this.#renderer.setPixelRatio(pixels);
      this.#renderer.setSize(size[0], size[1], false);
    }
    this.#camera.projectionMatrix.fromArray(view.clip);
    this.#camera.projectionMatrixInverse.copy(this.#camera.projectionMatrix).invert();
    const riseOfStep = view.rise * this.#bands.step;
    setUniform(this.#surface, 'pixels', pixels);
    setUniform(this.#surface, 'lift', view.lift);
    setUniform(this.#surface, 'riseOfStep', riseOfStep);
    for (const { material, object } of this.#hanging) {
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

/** Material of lines, and of the curtain that hides what stands behind it. */
function lineMaterial(strength: number, nearer: number): ShaderMaterial {
  return new ShaderMaterial({
    vertexShader: LINE_VERTEX,
    fragmentShader: LINE_FRAGMENT,
    transparent: strength < 1,
    premultipliedAlpha: true,
    blending: NormalBlending,
    depthWrite: strength === 1,
    side: DoubleSide,
    uniforms: {
      ink: { value: new Vector3() },
      strength: { value: strength },
      nearer: { value: nearer },
      riseOfStep: { value: 0 },
    },
  });
}

function setUniform(material: ShaderMaterial, name: string, value: unknown): void {
  const uniform = material.uniforms[name];
  if (uniform !== undefined) uniform.value = value;
}
