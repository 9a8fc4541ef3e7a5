import { describe, expect, it } from 'vitest';
import { cssOf, picturePoint } from '../../renderer/stage/picturePoint.ts';

const at = (left: number, top: number) =>
  ({ getBoundingClientRect: () => ({ left, top }) }) as unknown as Element;

describe('picturePoint', () => {
  it('is a whole pixel at 1:1, for the pixel that the pointer covers', () => {
    expect(picturePoint({ clientX: 126, clientY: 54 }, at(100, 50), 1, 1)).toEqual({ x: 26, y: 4 });
  });

  it('has zero at the centre of the first pixel: at 3:1 the middle one of its three screen pixels', () => {
    expect(
      [100, 101, 102].map((clientX) => picturePoint({ clientX, clientY: 50 }, at(100, 50), 3, 1).x),
    ).toEqual([-1 / 3, 0, 1 / 3].map((x) => expect.closeTo(x, 12)));
  });

  it('counts pixels of the screen where one CSS pixel is two of them', () => {
    // 1:1 on such a screen: CSS 100.5 is the second pixel of the screen
    expect(picturePoint({ clientX: 100.5, clientY: 50 }, at(100, 50), 1, 2)).toEqual({ x: 1, y: 0 });
  });

  it('is undone by cssOf up to the half pixel that a pointer is wide', () => {
    for (const zoom of [1, 2, 3, 8]) {
      const { x } = picturePoint({ clientX: 137, clientY: 50 }, at(100, 50), zoom, 1);
      expect(cssOf(x, zoom)).toBeCloseTo(37.5, 9);
    }
  });
});
