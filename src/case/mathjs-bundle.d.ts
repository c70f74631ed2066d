// The library in one file: it starts in a tenth of the time that its two thousand modules take.
declare module 'mathjs/lib/browser/math.js' {
  const math: import('mathjs').MathJsInstance;
  export default math;
}
