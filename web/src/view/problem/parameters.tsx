/** Names that cells may use, with their values. */
import type { Parameter, ParameterDiagnostic } from '../../shared/generated/eigenledger';
import { changeDocument } from '../../shared/store';

interface ParametersProps {
  readonly list: readonly Parameter[];
  readonly diagnostics: readonly ParameterDiagnostic[];
}

function replaced(list: readonly Parameter[], index: number, change: Partial<Parameter>): Parameter[] {
  return list.map((parameter, at) => (at === index ? { ...parameter, ...change } : parameter));
}

export function Parameters({ list, diagnostics }: ParametersProps) {
  const missing = diagnostics.filter(({ index }) => index === undefined);
  const add = (name: string) => { changeDocument({ parameters: [...list, { name, value: '' }] }); };
  return (
    <div class={list.length === 0 && missing.length === 0 ? 'parameters screen-only' : 'parameters'}>
      <h3>Parameters</h3>
      {list.length > 0 && (
        <table>
          <tbody>
            {list.map(({ name, value }, index) => {
              const found = diagnostics.filter((diagnostic) => diagnostic.index === index);
              const place = String(index + 1);
              return (
                <tr key={index}>
                  <td>
                    <input
                      class="digits"
                      size={6}
                      value={name}
                      aria-label={`name of parameter ${place}`}
                      onInput={(event) => {
                        changeDocument({ parameters: replaced(list, index, { name: event.currentTarget.value }) });
                      }}
                    />
                  </td>
                  <td aria-hidden="true">=</td>
                  <td>
                    <input
                      class="digits"
                      size={14}
                      value={value}
                      aria-label={`value of ${name || `parameter ${place}`}`}
                      aria-invalid={found.some(({ severity }) => severity === 'error')}
                      onInput={(event) => {
                        changeDocument({ parameters: replaced(list, index, { value: event.currentTarget.value }) });
                      }}
                    />
                  </td>
                  <td>
                    <button
                      type="button"
                      class="quiet"
                      aria-label={`remove ${name || `parameter ${place}`}`}
                      onClick={() => { changeDocument({ parameters: list.filter((_, at) => at !== index) }); }}
                    >
                      remove
                    </button>
                  </td>
                  <td class="soft">{found.map(({ message }) => message).join(' ')}</td>
                </tr>
              );
            })}
          </tbody>
        </table>
      )}
      {missing.map(({ name, message }) => (
        <p key={name}>
          {message}{' '}
          <button type="button" onClick={() => { add(name); }}>
            give {name} a value
          </button>
        </p>
      ))}
      <button type="button" class="quiet screen-only" onClick={() => { add(''); }}>
        add a parameter
      </button>
      {list.length === 0 && (
        <span class="soft screen-only">Cells may use names, such as k1 + k2 or -3·t/2.</span>
      )}
    </div>
  );
}
