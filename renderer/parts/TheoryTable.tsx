import type { Theory } from '../../analysis/sheet/result.ts';
import { theoryNames } from './theoryNames.ts';

/** How well each model's curve agrees with the track. */
export function TheoryTable({ theory }: { readonly theory: readonly Theory[] }) {
  if (theory.length === 0) return <p class="hint">No model could be held against the tracks.</p>;
  return (
    <table>
      <thead>
        <tr>
          <th scope="col">Model</th>
          <th scope="col">Body</th>
          <th scope="col">χ² / dof</th>
        </tr>
      </thead>
      <tbody>
        {theory.map((t) => (
          <tr key={t.model + t.body}>
            <th scope="row">
              {theoryNames[t.model].text} <span class="hint">{theoryNames[t.model].letter}</span>
            </th>
            <td>{t.body}</td>
            <td class="figures">
              {t.chiSquared.toPrecision(3)} / {t.dof}
            </td>
          </tr>
        ))}
      </tbody>
    </table>
  );
}
