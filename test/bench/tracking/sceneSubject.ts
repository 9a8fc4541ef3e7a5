import { mkdtemp, rm } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import type { Picture } from '../../../analysis/track/track.ts';
import { type Scene, writeScene } from '../../../fixtures/scenes.ts';
import { openFootage } from '../../../main/footage/openFootage.ts';
import { readSheet } from '../../../main/jobs/readSheet.ts';
import { sceneBound } from './sceneBound.ts';
import { spreadOver } from './spreadOver.ts';
import type { GoalName, Subject } from './subject.ts';

/** Scenes that count for a goal; the others only for frames lost and coverage. */
const goals: Readonly<Record<string, GoalName>> = {
  clean: 'plain',
  noisy: 'textured',
  coded: 'coded',
  blurred: 'blurred',
  faint: 'faint',
  stills16: 'plain',
  rollingShutter: 'plain',
  bareBead: 'plain',
  crossing: 'plain',
  knock: 'textured',
  turning: 'plain',
  flicker: 'plain',
  dust: 'plain',
};

/** Films a scene, writes it as footage, and reads it back as the program does. */
export async function sceneSubject(scene: Scene, instants: number): Promise<Subject> {
  const drop = scene.make();
  const folder = await mkdtemp(join(tmpdir(), 'tetherfall-bench-'));
  try {
    const { footagePath, sheetPath, truth } = await writeScene(drop, folder);
    const { sheet } = await readSheet(sheetPath);
    const pictures: Picture[] = [];
    const source = await openFootage(footagePath);
    try {
      await source.index({
        onFrame({ picture }) {
          pictures.push({ ...picture, luma: picture.luma.slice() });
        },
      });
    } finally {
      await source.close();
    }
    const movesFrom = truth.frames.findIndex((f) => f.timeS > truth.releaseTimeS);
    const after = truth.frames.findIndex((f) => f.timeS >= truth.extension.farthest.timeS);
    const extendsAt = (after < 0 ? truth.frames.length : after) - 1;
    const frames = spreadOver(movesFrom, extendsAt, instants);
    const bodies = (['tip', 'ball'] as const).map((id) => {
      const patchPx = sheet.bodies.find((b) => b.id === id)?.patchPx;
      if (patchPx === undefined) throw new Error(`scene ${scene.name}: its sheet states no patch of ${id}`);
      return {
        id,
        goal: goals[scene.name] ?? null,
        xPx: truth.frames.map((f) => f[id].x),
        yPx: truth.frames.map((f) => f[id].y),
        bound: sceneBound(drop, id, frames, patchPx),
      };
    });
    return { name: scene.name, pictures, sheet, bodies, movesFrom, extendsAt };
  } finally {
    await rm(folder, { recursive: true, force: true, maxRetries: 10 });
  }
}
