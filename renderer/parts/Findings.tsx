import type { Finding } from '../../analysis/sheet/result.ts';

const levels = ['stop', 'caution', 'note'] as const;
const signs: Readonly<Record<Finding['level'], string>> = { stop: '■', caution: '▲', note: '·' };

/** Findings, the grave ones first; each says its level in a word. */
export function Findings({ findings }: { readonly findings: readonly Finding[] }) {
  if (findings.length === 0) return null;
  const ordered = levels.flatMap((level) => findings.filter((f) => f.level === level));
  return (
    <ul class="findings">
      {ordered.map((f) => (
        <li key={f.code + f.text} class={`finding finding-${f.level}`}>
          <span class="finding-level">
            <span aria-hidden="true">{signs[f.level]}</span> {f.level}
          </span>
          <span>{f.text}</span>
        </li>
      ))}
    </ul>
  );
}
