import type { Design } from '#engine/model/design.ts';

declare global {
  interface Window {
    /** Put there before the page runs. */
    benchDesign: Design;
    /** How many parts the page hands to the canvas library, once it has drawn them. */
    benchParts?: { readonly nodes: number; readonly edges: number };
    beginFrames: () => void;
    /** Milliseconds between frames since `beginFrames`. */
    endFrames: () => readonly number[];
  }
}

let times: number[] = [];
let last: number | undefined;
const tick = (now: number): void => {
  if (last === undefined) return;
  times.push(now - last);
  last = now;
  requestAnimationFrame(tick);
};

/** Makes a page tell how long its frames take. */
export const watchFrames = (): void => {
  window.beginFrames = () => {
    times = [];
    requestAnimationFrame((now) => {
      last = now;
      requestAnimationFrame(tick);
    });
  };
  window.endFrames = () => {
    last = undefined;
    return times;
  };
};
