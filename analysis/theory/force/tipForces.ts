import type { BodyMotion } from '../../motion/bodyMotion.ts';
import type { Release } from '../../motion/release.ts';
import type { Finding, LoadCellResult, Tension } from '../../sheet/result.ts';
import type { Sheet } from '../../sheet/sheet.ts';
import { assumedUMassRel } from '../models/foldedTether.ts';
import type { LocalGravity } from '../normalGravity.ts';
import { holdLoadCell } from './holdLoadCell.ts';
import type { ForceRecord } from './parseForceRecord.ts';
import { tensionOf } from './tension.ts';

/** A drop as far as its forces go. */
export interface TipForcesInput {
  readonly sheet: Sheet;
  readonly gravity: LocalGravity;
  readonly uLengthRel: number;
  readonly release: Release;
  readonly extensionS: number | null;
  readonly motion: BodyMotion;
  readonly record: ForceRecord | null;
}

export interface TipForces {
  readonly tension: Tension | null;
  readonly loadCell: LoadCellResult | null;
  readonly findings: Finding[];
}

/** Pull of the tether from the tip's motion, and the load cell's record held against it; nothing without the tether's mass. */
export function tipForces(input: TipForcesInput): TipForces {
  const { sheet, gravity, uLengthRel, release, extensionS, record } = input;
  const { tether, loadCell } = sheet;
  if (tether?.massKg === undefined) {
    const text =
      'The load cell is held against the pull worked out from the motion, which needs the mass of the tether: state tether.massKg.';
    const findings: Finding[] = loadCell ? [{ level: 'caution', code: 'tetherMassMissing', text }] : [];
    return { tension: null, loadCell: null, findings };
  }
  const { motion, bandwidthHz } = input.motion;
  const { massKg, tipMassKg = 0 } = tether;
  const tension = tensionOf({
    motion,
    startYM: release.yM,
    releaseS: release.timeS,
    untilS: extensionS ?? motion.timeS[motion.timeS.length - 1],
    massKg,
    uMassKg: tether.uMassKg ?? assumedUMassRel * massKg,
    tipMassKg,
    uTipMassKg: tether.uTipMassKg ?? assumedUMassRel * tipMassKg,
    lengthM: tether.lengthM,
    uLengthM: tether.uLengthM ?? 0,
    gravity,
    uLengthRel,
  });
  if (tension.timeS.length === 0) return { tension: null, loadCell: null, findings: [] };
  const findings: Finding[] = [];
  if (tether.uMassKg === undefined)
    findings.push({
      level: 'note',
      code: 'assumed',
      text: `Not stated, so assumed for the tension: mass of the tether good to ${assumedUMassRel * 100} % (tether.uMassKg). State it in the sheet.`,
    });
  if (!loadCell || !record) return { tension, loadCell: null, findings };
  const inFall = bandwidthHz.filter(
    (hz, i) => Number.isFinite(hz) && tension.timeS.includes(motion.timeS[i]),
  );
  const held = holdLoadCell(record, loadCell, tension, extensionS, Math.max(...inFall));
  return { tension, loadCell: held.loadCell, findings: [...findings, ...held.findings] };
}
