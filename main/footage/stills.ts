import { readdir } from 'node:fs/promises';
import { basename, dirname, join } from 'node:path';
import type { Finding } from '../../analysis/sheet/result.ts';
import { Refusal } from '../refusal.ts';

/** A numbered sequence: stem, digits, ending, as in `shot_0042.png`. */
interface Numbered {
  readonly file: string;
  readonly stem: string;
  readonly digits: string;
  readonly ending: string;
}

export interface Stills {
  readonly files: readonly string[];
  readonly findings: readonly Finding[];
}

/** The stills that a pattern such as `shot_%04d.png` stands for, by number. */
export async function stillsOfPattern(pattern: string): Promise<Stills> {
  const parts = /^(.*)%(?:0(\d+))?d(.*)$/.exec(basename(pattern));
  const all = await numberedStills(dirname(pattern));
  const width = Number(parts?.[2] ?? 1);
  const found = all.filter(
    (n) =>
      n.stem === parts?.[1] &&
      n.ending === parts[3] &&
      (n.digits.length === width || (n.digits.length > width && !n.digits.startsWith('0'))),
  );
  if (found.length === 0) {
    throw new Refusal(
      'footageNotFound',
      3,
      `${pattern}: no file fits this pattern; check folder and numbering`,
    );
  }
  return inOrder(found, []);
}

/** The numbered stills of a folder; where it holds several sequences, the longest. */
export async function stillsInFolder(folder: string): Promise<Stills> {
  const sequences = new Map<string, (Numbered & { path: string })[]>();
  for (const still of await numberedStills(folder)) {
    const key = `${still.stem}/${still.ending}`;
    sequences.set(key, [...(sequences.get(key) ?? []), still]);
  }
  const byLength = [...sequences.values()].sort((a, b) => b.length - a.length);
  const longest = byLength[0];
  if (longest === undefined) {
    throw new Refusal(
      'footageNotFound',
      3,
      `${folder}: this folder holds no numbered PNG or TIFF stills; give a video file or a folder with stills`,
    );
  }
  const findings: Finding[] = [];
  const stem = longest[0]?.stem ?? '';
  if (byLength.length > 1) {
    findings.push({
      level: 'caution',
      code: 'severalSequences',
      text: `${basename(folder)}: holds ${byLength.length} numbered sequences; the longest, ${stem}…, is used`,
    });
  }
  return inOrder(longest, findings);
}

/** The sequence that goes on from a still; a still without a number stands alone. */
export async function stillsStartingAt(path: string): Promise<Stills> {
  const first = numbered(basename(path));
  if (first === null) return { files: [path], findings: [] };
  const all = await numberedStills(dirname(path));
  const from = Number(first.digits);
  const same = all.filter(
    (n) => n.stem === first.stem && n.ending === first.ending && Number(n.digits) >= from,
  );
  return inOrder(same, []);
}

async function numberedStills(folder: string): Promise<(Numbered & { path: string })[]> {
  const names = await readdir(folder).catch(() => []);
  return names.flatMap((name) => {
    const parts = numbered(name);
    return parts === null ? [] : [{ ...parts, path: join(folder, name) }];
  });
}

function numbered(file: string): Numbered | null {
  const parts = /^(.*?)(\d+)(\.(?:png|tiff?))$/i.exec(file);
  if (parts === null) return null;
  return { file, stem: parts[1] ?? '', digits: parts[2] ?? '', ending: parts[3] ?? '' };
}

function inOrder(found: readonly (Numbered & { path: string })[], already: readonly Finding[]): Stills {
  const sorted = [...found].sort((a, b) => Number(a.digits) - Number(b.digits));
  const first = Number(sorted[0]?.digits ?? 0);
  const last = Number(sorted.at(-1)?.digits ?? 0);
  const missing = last - first + 1 - sorted.length;
  const findings = [...already];
  if (missing !== 0) {
    const text =
      missing > 0
        ? `stills ${first} to ${last}: ${missing} of the numbers are missing, so frames are missing or the numbering jumps`
        : `stills ${first} to ${last}: ${-missing} of the numbers occur more than once`;
    findings.push({ level: 'caution', code: 'stillsMissing', text });
  }
  return { files: sorted.map((n) => n.path), findings };
}
