import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, describe, expect, it } from 'vitest';
import { tetherfallHere } from './commandHere.ts';

const folder = mkdtempSync(join(tmpdir(), 'tetherfall-plan-'));
afterAll(() => rmSync(folder, { recursive: true, force: true }));

const order = {
  schema: 'tetherfall/plan/1',
  wanted: [
    { quantity: 'ball.g', uRel: 0.0005 },
    { quantity: 'tip.peakAcceleration', uRel: 0.05 },
  ],
  tether: { lengthM: 1, links: 60, separationM: 0.05 },
  picture: { widthPx: 640, heightPx: 1024, fieldHeightM: 1.3 },
};

function written(name: string, content: unknown): string {
  const path = join(folder, name);
  writeFileSync(path, typeof content === 'string' ? content : JSON.stringify(content));
  return path;
}

describe('tetherfall plan', () => {
  it('prints how to film, what to expect, what it is made of and what was assumed', async () => {
    const { status, stdout, stderr } = await tetherfallHere(['plan', written('good.json', order)]);
    expect({ status, stderr }).toEqual({ status: 0, stderr: '' });
    expect(stdout).toMatch(
      /^Film with\n {2}capture rate {2}\d+ Hz\n {2}exposure +\d+ µs +blur [\d.]+ px at /,
    );
    expect(stdout).toMatch(
      /ball\.g +\(9\.8\d+ ± 0\.0\d+\) m\/s² +0\.\d+ %, wanted 0\.05 % +NOT REACHED: camera pitch limits/,
    );
    expect(stdout).toMatch(/tip\.peakAcceleration +\(\d+ ± \d+\) m\/s² +[\d.]+ %, wanted 5 % +reached/);
    expect(stdout).toContain('Not stated, so assumed: camera level to 0.5° (camera.uPitchRad).');
    for (const line of stdout.split('\n')) expect(line).toBe(line.trimEnd());
  });

  it('gives the same as JSON for programs', async () => {
    const { status, stdout } = await tetherfallHere(['plan', written('good.json', order), '--json']);
    expect(status).toBe(0);
    expect(JSON.parse(stdout)).toMatchObject({
      values: [{ quantity: 'ball.g', reached: false }, { reached: true }],
    });
  });

  it.each<[string, unknown, RegExp]>([
    ['text.json', 'peak to 5 %', /not JSON/],
    [
      'unit.json',
      { ...order, picture: { ...order.picture, fieldHeightMm: 1300 } },
      /picture: .*fieldHeightMm/,
    ],
    ['empty.json', { ...order, wanted: [] }, /wanted: /],
    [
      'slow.json',
      { ...order, camera: { highestCaptureRateHz: 100 } },
      /100 Hz is too slow: 2 frames in the half width/,
    ],
  ])('refuses %s with one line and status 2', async (name, content, line) => {
    const { status, stdout, stderr } = await tetherfallHere(['plan', written(name, content)]);
    expect({ status, stdout }).toEqual({ status: 2, stdout: '' });
    expect(stderr).toMatch(/^tetherfall: Plan [^\n]+\n$/);
    expect(stderr).toMatch(line);
  });

  it('refuses a plan that is not there', async () => {
    const { status, stderr } = await tetherfallHere(['plan', join(folder, 'none.json')]);
    expect(status).toBe(2);
    expect(stderr).toMatch(/none\.json: it cannot be read; check the path\.\n$/);
  });
});
