import type { Finding } from '../../sheet/result.ts';
import type { Sheet } from '../../sheet/sheet.ts';
import type { Picture } from '../../track/track.ts';
import { type NotRefined, type RefinedMark, refineMark } from './refineMark.ts';

/** Whether any mark of the sheet asks to be refined. */
export function asksToRefine({ scale }: Sheet): boolean {
  return scale.bars.some((b) => b.refine) || (scale.fiducials ?? []).some((f) => f.refine);
}

/**
 * The sheet with the marks that ask for it (`refine`) moved to the centres of their targets, and with their uncertainty from the
 * picture. A mark that cannot be refined stays, with a finding and the uncertainty that is stated for it.
 */
export function refineSheet(sheet: Sheet, picture: Picture): { sheet: Sheet; findings: Finding[] } {
  const findings: Finding[] = [];
  const refined = (at: { x: number; y: number }, where: string): RefinedMark | NotRefined => {
    const found = refineMark(picture, at);
    findings.push(found.ok ? movedFinding(at, found, where) : keptFinding(found, where));
    return found;
  };
  const bars = sheet.scale.bars.map((bar, i) => {
    if (!bar.refine) return bar;
    const [a, b] = [refined(bar.a, `scale.bars[${i}].a`), refined(bar.b, `scale.bars[${i}].b`)];
    // Only what lies along the bar counts; an edge has its uncertainty there, or the bar was marked across its edge.
    const along = Math.atan2(bar.b.y - bar.a.y, bar.b.x - bar.a.x);
    const us = [a, b].map((m) => (m.ok ? uAlong(m, along) : undefined));
    const [uA, uB] = us;
    return {
      ...bar,
      a: a.ok ? { x: a.x, y: a.y } : bar.a,
      b: b.ok ? { x: b.x, y: b.y } : bar.b,
      ...(uA !== undefined && uB !== undefined ? { uMarkPx: Math.hypot(uA, uB) / Math.SQRT2 } : {}),
    };
  });
  const fiducials = sheet.scale.fiducials?.map((f, i) => {
    if (!f.refine) return f;
    const at = refined(f, `scale.fiducials[${i}]`);
    if (!at.ok || at.kind === 'edge') return f;
    return { ...f, x: at.x, y: at.y, uMarkPx: Math.hypot(at.uXPx, at.uYPx) / Math.SQRT2 };
  });
  return {
    sheet: { ...sheet, scale: { ...sheet.scale, bars, ...(fiducials === undefined ? {} : { fiducials }) } },
    findings,
  };
}

/** Uncertainty of a mark along a direction [px]; undefined for an edge that runs along it. */
function uAlong({ uXPx, uYPx, acrossRad }: RefinedMark, direction: number): number | undefined {
  if (acrossRad !== undefined && Math.abs(Math.cos(acrossRad - direction)) < 0.9) return undefined;
  return Math.hypot(uXPx * Math.cos(direction), uYPx * Math.sin(direction));
}

function movedFinding(from: { x: number; y: number }, to: RefinedMark, where: string): Finding {
  return {
    level: 'note',
    code: 'markRefined',
    text: `${where}: ${to.kind} found at x ${to.x.toFixed(3)} ± ${to.uXPx.toFixed(3)}, y ${to.y.toFixed(3)} ± ${to.uYPx.toFixed(3)} px; it was set at x ${from.x}, y ${from.y}.`,
  };
}

function keptFinding({ reason }: NotRefined, where: string): Finding {
  return {
    level: 'caution',
    code: 'markNotRefined',
    text: `${where}: could not be refined, for ${reason}; its place was kept as it was set. Set it on its target, or leave refine out.`,
  };
}
