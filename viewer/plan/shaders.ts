/** Shaders of the surface and of the lines that hang from it. Written for WebGL 2 (three adds the version line). */

/** Attributes: position (x, y, 0), time in steps of the bands, gradient of the height at lift 1. */
export const SURFACE_VERTEX = /* glsl */ `
  uniform float riseOfStep;
  uniform float lift;
  attribute float time;
  attribute vec2 slope;
  varying float vTime;
  varying vec2 vSlope;
  void main() {
    vTime = time;
    vSlope = slope * lift;
    gl_Position = projectionMatrix * vec4(position.xy, time * riseOfStep, 1.0);
  }
`;

/**
 * Bands with an isoline at each edge, every fourth heavy. Distances to an edge are taken in px by the screen
 * derivative of the time, so lines keep their width at every lift; thin lines fade where they would crowd.
 */
export const SURFACE_FRAGMENT = /* glsl */ `
  uniform sampler2D bands;
  uniform float bandCount;
  uniform float pixels;
  uniform float lift;
  uniform vec3 lightInk;
  uniform vec3 darkInk;
  varying float vTime;
  varying vec2 vSlope;

  vec3 band(float index) {
    return texture2D(bands, vec2((clamp(index, 0.0, bandCount - 1.0) + 0.5) / bandCount, 0.5)).rgb;
  }

  float lightness(vec3 colour) {
    return dot(colour, vec3(0.3, 0.59, 0.11));
  }

  void main() {
    vec3 colour = band(floor(vTime));
    vec3 normal = normalize(vec3(-vSlope, 1.0));
    float lit = dot(normal, normalize(vec3(-0.55, 0.35, 0.76)));
    colour *= 1.0 + lift * clamp((lit - 0.76) * 0.55, -0.10, 0.14);

    float perPixel = max(fwidth(vTime), 1e-6);
    float edge = floor(vTime + 0.5);
    if (edge > 0.5) {
      bool heavy = mod(edge + 0.5, 4.0) < 1.0;
      float away = abs(vTime - edge) / perPixel;
      float halfWidth = (heavy ? 0.62 : 0.42) * pixels;
      float cover = 1.0 - smoothstep(halfWidth - 0.5, halfWidth + 0.5, away);
      float apart = (heavy ? 4.0 : 1.0) / perPixel / pixels;
      cover *= heavy ? smoothstep(2.0, 5.0, apart) : smoothstep(2.5, 7.0, apart);
      bool light = lightness(band(edge)) < 0.52;
      colour = mix(colour, light ? lightInk : darkInk, cover * (heavy ? 0.92 : 0.34));
    }
    gl_FragColor = vec4(colour, 1.0);
  }
`;

/** Lines of one px: uprights from the wall to the surface, and its rim. \`time\` is 0 on the sheet. */
export const LINE_VERTEX = /* glsl */ `
  uniform float riseOfStep;
  uniform float nearer;
  attribute float time;
  void main() {
    gl_Position = projectionMatrix * vec4(position.xy, time * riseOfStep, 1.0);
    gl_Position.z -= nearer;
  }
`;

export const LINE_FRAGMENT = /* glsl */ `
  uniform vec3 ink;
  uniform float strength;
  void main() {
    gl_FragColor = vec4(ink * strength, strength);
  }
`;
