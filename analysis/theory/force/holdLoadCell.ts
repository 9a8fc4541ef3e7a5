import { rootMeanSquare } from '../../fit/rootMeanSquare.ts';
import { triangular } from '../../fit/triangular.ts';
import type { LoadCell } from '../../sheet/loadCell.ts';
import type { Finding, LoadCellResult, Tension } from '../../sheet/result.ts';
import { forceNoise } from './forceNoise.ts';
import type { ForceRecord } from './parseForceRecord.ts';
import { forceAt, synchronise } from './synchronise.ts';

/** A cell whose certificate is not stated is taken as good to this share of its reading. */
const assumedUForceRel = 0.01;
/** Sampling rates that differ by more than this share are a mistake, not a tolerance. */
const rateTolerance = 0.005;
/** Root mean square of standardised differences above which the two disagree: a coverage factor of 2. */
const disagreesAbove = 2;
/** A correlation below this is not that of one drop. */
const leastCorrelation = 0.9;

export interface HeldLoadCell {
  readonly loadCell: LoadCellResult | null;
  readonly findings: Finding[];
}

/**
 * A load cell's record held against the pull on the anchor that was worked out from the motion.
 *
 * @param bandwidthHz  of the motion's acceleration at its narrowest over the fall: what the cell sees above is not in the motion
 */
export function holdLoadCell(
  record: ForceRecord,
  stated: LoadCell,
  tension: Tension,
  extensionS: number | null,
  bandwidthHz: number,
): HeldLoadCell {
  const findings: Finding[] = [...samplingFindings(record, stated)];
  const { uForceRel = assumedUForceRel } = stated;
  if (stated.uForceRel === undefined)
    findings.push({
      level: 'note',
      code: 'assumed',
      text: `Not stated, so assumed: load cell good to ${assumedUForceRel * 100} % of its reading (loadCell.uForceRel). State it in the sheet.`,
    });
  const together =
    tension.timeS.length >= 8 ? synchronise(record, tension, extensionS, stated.synchronisation) : null;
  if (!together) {
    findings.push({
      level: 'caution',
      code: 'loadCellNotSynchronised',
      text: 'The load cell’s record and the fall cannot be brought together: the record is shorter than the fall, or extension was not seen. Give a longer record or state loadCell.synchronisation as an offset.',
    });
    return { loadCell: null, findings };
  }
  const { offsetS, correlation } = together;
  const noiseN = forceNoise(record);
  const forceN = forceAt(
    record,
    tension.timeS.map((t) => t - offsetS),
  );
  const kept = forceN.flatMap((f, i) => (Number.isFinite(f) ? [i] : []));
  const differenceN = kept.map((i) => forceN[i] - tension.anchorN[i]);
  const standardised = kept.map(
    (i, k) => differenceN[k] / Math.hypot(tension.uAnchorN[i], noiseN, uForceRel * forceN[i]),
  );
  const loadCell: LoadCellResult = {
    offsetS,
    uOffsetS: offsetUncertainty(tension, noiseN, stated.samplingRateHz),
    correlation,
    samplingRateHz: stated.samplingRateHz,
    channelFrequencyClass: stated.channelFrequencyClass,
    timeS: kept.map((i) => tension.timeS[i]),
    forceN: kept.map((i) => forceN[i]),
    rmsDifferenceN: rootMeanSquare(differenceN),
    rmsStandardised: rootMeanSquare(standardised),
  };
  findings.push(...agreement(loadCell, stated), ...bandwidthFinding(stated, bandwidthHz));
  return { loadCell, findings };
}

function samplingFindings(
  { timeS }: ForceRecord,
  { samplingRateHz, channelFrequencyClass }: LoadCell,
): Finding[] {
  const rateHz = (timeS.length - 1) / (timeS[timeS.length - 1] - timeS[0]);
  const findings: Finding[] = [];
  if (Math.abs(rateHz / samplingRateHz - 1) > rateTolerance)
    findings.push({
      level: 'caution',
      code: 'samplingRateDisagrees',
      text: `The load cell's record has ${rateHz.toPrecision(5)} rows a second, the sheet states ${samplingRateHz} Hz (loadCell.samplingRateHz): rows are missing or one of them is wrong.`,
    });
  // SAE J211-1: at least ten samples to the period of the class
  if (channelFrequencyClass > 0 && samplingRateHz < 10 * channelFrequencyClass)
    findings.push({
      level: 'caution',
      code: 'samplingRateLow',
      text: `Channel frequency class ${channelFrequencyClass} asks for at least ${10 * channelFrequencyClass} samples a second (SAE J211-1); the load cell has ${samplingRateHz}.`,
    });
  return findings;
}

/**
 * Standard uncertainty of a shift between two curves of which one has an unknown gain and zero: the part of the slope that neither
 * a constant nor the curve itself can take up is what tells the shift (weighted regression). A sample's width, rectangular, is added.
 */
function offsetUncertainty(
  { timeS, anchorN, uAnchorN }: Tension,
  noiseN: number,
  samplingRateHz: number,
): number {
  const u = uAnchorN.map((own) => Math.hypot(own, noiseN));
  const inner = timeS.slice(1, -1).map((_, k) => k + 1);
  const columns = [
    inner.map((i) => 1 / u[i]),
    inner.map((i) => anchorN[i] / u[i]),
    inner.map((i) => (anchorN[i + 1] - anchorN[i - 1]) / (timeS[i + 1] - timeS[i - 1]) / u[i]),
  ].map((column) => Float64Array.from(column));
  // The last diagonal of the triangle is what is left of the slope.
  const { r } = triangular(columns, new Float64Array(inner.length));
  return Math.hypot(1 / r[2][2], 1 / (samplingRateHz * Math.sqrt(12)));
}

function agreement(found: LoadCellResult, { synchronisation }: LoadCell): Finding[] {
  const { offsetS, uOffsetS, correlation, rmsDifferenceN, rmsStandardised } = found;
  const how = {
    crossCorrelation: 'cross-correlation',
    peak: 'its peak at extension',
    offset: 'the stated offset',
  };
  const clock = `Load cell brought to the footage's clock by ${how[synchronisation.kind]}: ${(offsetS * 1000).toFixed(2)} ms to be added to its times${synchronisation.kind === 'crossCorrelation' ? ` (u ${(uOffsetS * 1000).toPrecision(2)} ms)` : ''}, correlation ${correlation.toFixed(3)}`;
  const figures = `root mean square of the difference ${rmsDifferenceN.toPrecision(2)} N, ${rmsStandardised.toPrecision(2)} of its uncertainty`;
  if (correlation < leastCorrelation)
    return [
      {
        level: 'caution',
        code: 'loadCellUnlike',
        text: `${clock}: the two forces are hardly alike. Check that the record is of this drop and that pull is positive.`,
      },
    ];
  const agrees = rmsStandardised <= disagreesAbove;
  return [
    {
      level: agrees ? 'note' : 'caution',
      code: agrees ? 'loadCellAgrees' : 'loadCellDisagrees',
      text: `${clock}. It ${agrees ? 'agrees' : 'disagrees'} with the pull from the motion: ${figures}.`,
    },
  ];
}

/** A class passes up to 5/3 of its number (-3 dB). */
function bandwidthFinding({ channelFrequencyClass }: LoadCell, bandwidthHz: number): Finding[] {
  const passesHz = (channelFrequencyClass * 5) / 3;
  if (channelFrequencyClass === 0 || passesHz >= bandwidthHz) return [];
  return [
    {
      level: 'note',
      code: 'loadCellSlower',
      text: `The load cell's class ${channelFrequencyClass} passes up to ${passesHz.toFixed(0)} Hz, the motion up to ${bandwidthHz.toFixed(0)} Hz: the cell may smooth what the motion shows.`,
    },
  ];
}
