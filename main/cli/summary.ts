import type { Finding, Result } from '../../analysis/sheet/result.ts';
import type { Sheet, SheetLimit } from '../../analysis/sheet/sheet.ts';
import { formatMeasured, unitSign } from '../../analysis/uncertainty/formatMeasured.ts';
import { table } from './table.ts';

/** Wide enough for the tables, narrow enough to read. */
const widthOfText = 110;

/** A result for a person: key values with uncertainty, verdicts, findings. Lines without end marks. */
export function summary(sheet: Sheet, result: Result): string[] {
  const { keyValues, motion, verdicts, findings } = result;
  const lines = ['Key values (value ± standard uncertainty; U95 is the half-width of the 95 % interval)'];
  lines.push(
    ...table(
      keyValues.map((k) => [
        k.quantity,
        formatMeasured(k.value, k.u, k.unit),
        `U95 ${twoDigits(k.U95)}`,
        k.bandwidthHz === undefined ? '' : `bandwidth ${Number(k.bandwidthHz.toPrecision(3))} Hz`,
      ]),
    ),
  );
  if (Object.keys(motion).length > 0) lines.push('', 'Motion', ...motionLines(motion));
  if (verdicts.length > 0) {
    lines.push('', 'Verdict');
    lines.push(
      ...table(
        verdicts.map((v, i) => [
          v.outcome.toUpperCase(),
          v.quantity,
          limitText(sheet.limits[i]),
          v.margin === null ? '' : `margin ${marginText(v.quantity, v.margin, v.unit, result)}`,
          `(${v.rule})`,
        ]),
      ),
    );
  }
  if (findings.length > 0) lines.push('', 'Findings', ...findingLines(findings));
  return lines;
}

/** Findings, the gravest first, wrapped under themselves. */
export function findingLines(findings: readonly Finding[]): string[] {
  const levels = ['stop', 'caution', 'note'] as const;
  const sorted = levels.flatMap((level) => findings.filter((f) => f.level === level));
  return sorted.flatMap((f) => {
    const [first = '', ...rest] = wrapped(f.text, widthOfText - 11);
    return [`  ${f.level.padEnd(7)}  ${first}`, ...rest.map((line) => `           ${line}`)];
  });
}

/** Two significant digits, as for any uncertainty, without a power of ten. */
function twoDigits(value: number): string {
  const text = value.toPrecision(2);
  return text.includes('e') ? String(Number(text)) : text;
}

/** Each method once, then how far it passes the acceleration of each body. */
function motionLines(motion: Result['motion']): string[] {
  const methods = [...new Set(Object.values(motion).map((m) => m.method))];
  return [
    ...methods.flatMap((method) => wrapped(method, widthOfText - 2).map((line) => `  ${line}`)),
    ...table(Object.entries(motion).map(([body, m]) => [body, bandwidthText(m.settings.bandwidthHz)])),
  ];
}

/** From the least to the greatest bandwidth of a body's motion. */
function bandwidthText(bandwidthHz: unknown): string {
  if (!Array.isArray(bandwidthHz)) return '';
  const known = bandwidthHz.filter((hz) => typeof hz === 'number' && Number.isFinite(hz));
  if (known.length === 0) return '';
  const least = known.reduce((a, b) => Math.min(a, b));
  const most = known.reduce((a, b) => Math.max(a, b));
  const figure = (hz: number) => String(Number(hz.toPrecision(3)));
  return least === most
    ? `bandwidth ${figure(least)} Hz`
    : `bandwidth ${figure(least)} to ${figure(most)} Hz`;
}

/** A limit is exact, so its margin is as uncertain as the value. */
function marginText(quantity: string, margin: number, unit: string, { keyValues }: Result): string {
  const value = keyValues.find((k) => k.quantity === quantity);
  return formatMeasured(margin, value?.u ?? Number.NaN, unit);
}

function limitText(limit: SheetLimit | undefined): string {
  if (!limit) return '';
  const sides = [
    limit.min === undefined ? '' : `min ${limit.min}`,
    limit.max === undefined ? '' : `max ${limit.max}`,
  ].filter((side) => side !== '');
  return `${sides.join(', ')} ${unitSign(limit.unit)}`.trimEnd();
}

function wrapped(text: string, width: number): string[] {
  const lines: string[] = [];
  let line = '';
  for (const word of text.split(' ')) {
    if (line !== '' && line.length + 1 + word.length > width) {
      lines.push(line);
      line = word;
    } else line = line === '' ? word : `${line} ${word}`;
  }
  return [...lines, line];
}
