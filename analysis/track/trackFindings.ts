import type { Finding } from '../sheet/result.ts';
import type { SheetBody } from '../sheet/sheet.ts';
import type { Track } from './track.ts';

/** A body that goes less than this all through the footage was probably not the body. */
const leastTravelPx = 2;

/** What is to be said of the tracks: frames lost and bridged, bodies that never moved. */
export function trackFindings(tracks: readonly Track[], bodies: readonly SheetBody[]): Finding[] {
  const findings: Finding[] = [];
  for (const track of tracks) {
    const role = bodies.find((b) => b.id === track.bodyId)?.role ?? 'other';
    const lost = track.state.flatMap((s, i) => (s === 'lost' ? [track.frame[i]] : []));
    const bridged = track.state.filter((s) => s === 'bridged').length;
    if (lost.length > 0) {
      findings.push({
        level: 'caution',
        code: 'bodyLost',
        text: `Body ${track.bodyId} was lost in ${lost.length} of ${track.frame.length} frames, first in frame ${lost[0]}. Set it by hand in that frame if it can be seen there.`,
      });
    }
    if (bridged > 0) {
      findings.push({
        level: 'note',
        code: 'bodyBridged',
        text: `Body ${track.bodyId} was out of sight in ${bridged === 1 ? '1 frame; its place there is' : `${bridged} frames; its places there are`} inferred and not used as data.`,
      });
    }
    if (role !== 'other' && travelPx(track) < leastTravelPx) {
      findings.push({
        level: 'caution',
        code: 'bodyDidNotMove',
        text: `Body ${track.bodyId} never moved by more than ${leastTravelPx} px: was it placed on the background?`,
      });
    }
  }
  return findings;
}

function travelPx(track: Track): number {
  const start = track.state.findIndex((s) => s !== 'lost');
  if (start < 0) return 0;
  let most = 0;
  for (let i = start; i < track.frame.length; i++) {
    const d = Math.hypot(track.xPx[i] - track.xPx[start], track.yPx[i] - track.yPx[start]);
    if (d > most) most = d; // NaN where lost: not greater
  }
  return most;
}
