/**
 * What a short script would do, to compare with: OpenCV's adaptive threshold, dilation by 2.5 mm, connected components; boxes of the ink within.
 * It knows the scale and, in photographs, takes the perspective away first by the corners that the truth tells: no help that the engine had.
 */
import { applyHomography, invertHomography, type Homography } from '../../../server/engine/reading/homography.ts';
import { loadOpenCv } from '../../../server/engine/reading/opencv.ts';
import { decodePicture } from '../../../server/engine/reading/decode.ts';
import { probePicture } from '../../../server/engine/reading/probe.ts';
import type { MadePicture } from './picture-maker.ts';
import type { FoundGroup } from './score.ts';

const PX_PER_MM = 8, DILATE_MM = 2.5, WINDOW_PX = 51, OFFSET = 15, LEAST_PX = 20;

/** Boxes in px of the flat sheet that it made, and the map from there to mm. */
export async function plainPipeline(picture: MadePicture): Promise<{ groups: FoundGroup[]; toSheet: Homography }> {
  const { cv } = await loadOpenCv();
  const flat = await flatten(picture);
  const grey = cv.matFromArray(flat.height, flat.width, cv.CV_8UC1, flat.values as unknown as number[]);
  const ink = new cv.Mat(), grown = new cv.Mat(), labels = new cv.Mat();
  const side = 2 * Math.round((DILATE_MM * PX_PER_MM) / 2) + 1;
  const kernel = cv.getStructuringElement(cv.MORPH_ELLIPSE, new cv.Size(side, side));
  try {
    cv.adaptiveThreshold(grey, ink, 255, cv.ADAPTIVE_THRESH_GAUSSIAN_C, cv.THRESH_BINARY_INV, WINDOW_PX, OFFSET);
    cv.dilate(ink, grown, kernel);
    const count = cv.connectedComponents(grown, labels);
    const boxes = Array.from({ length: count }, () => ({ left: Infinity, top: Infinity, right: -1, bottom: -1, px: 0 }));
    for (let i = 0; i < flat.values.length; i++) {
      if (ink.data[i] === 0) continue;
      const box = boxes[labels.data32S[i]], x = i % flat.width, y = (i - x) / flat.width;
      box.left = Math.min(box.left, x); box.right = Math.max(box.right, x); box.top = Math.min(box.top, y); box.bottom = Math.max(box.bottom, y); box.px++;
    }
    const groups = boxes.slice(1).filter((b) => b.px >= LEAST_PX).map((b): FoundGroup => {
      const box = { x: b.left, y: b.top, w: b.right - b.left + 1, h: b.bottom - b.top + 1 };
      return { boxesPx: [box], widthMm: box.w / PX_PER_MM, heightMm: box.h / PX_PER_MM };
    });
    return { groups, toSheet: [1 / PX_PER_MM, 0, 0, 0, 1 / PX_PER_MM, 0, 0, 0, 1] };
  } finally {
    for (const mat of [grey, ink, grown, labels, kernel]) mat.delete();
  }
}

async function flatten(picture: MadePicture): Promise<{ width: number; height: number; values: Uint8Array }> {
  const pixels = await decodePicture(picture.file, probePicture(picture.file));
  const width = Math.round(picture.sheet.widthMm * PX_PER_MM), height = Math.round(picture.sheet.heightMm * PX_PER_MM);
  const back = invertHomography(picture.toSheet), values = new Uint8Array(width * height);
  for (let y = 0, i = 0; y < height; y++) {
    for (let x = 0; x < width; x++, i++) {
      const p = applyHomography(back, { x: (x + 0.5) / PX_PER_MM, y: (y + 0.5) / PX_PER_MM });
      const u = Math.min(pixels.width - 1, Math.max(0, Math.floor(picture.options.mirrored ? pixels.width - p.x : p.x))), v = Math.min(pixels.height - 1, Math.max(0, Math.floor(p.y)));
      const at = 4 * (v * pixels.width + u);
      values[i] = 0.3 * pixels.rgba[at] + 0.6 * pixels.rgba[at + 1] + 0.1 * pixels.rgba[at + 2];
    }
  }
  return { width, height, values };
}
