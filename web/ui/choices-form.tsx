import type { Choice } from '#contract/wind-choices.ts';
import { SelectField } from './field.tsx';

interface ChoicesFormProps<Key extends string> {
  choices: readonly Choice<Key>[];
  value: (key: Key) => string;
  onChange: (key: Key, value: string) => void;
}

/** One list a choice, the default first; what departs says so, and where its value comes from. */
export function ChoicesForm<Key extends string>({ choices, value, onChange }: ChoicesFormProps<Key>) {
  return (
    <ul className="flex flex-col">
      {choices.map((choice) => {
        const chosen = choice.values.find((one) => one.value === value(choice.key)) ?? choice.values[0]!;
        const standard = choice.values[0]!;
        const changed = chosen.value !== standard.value;
        return (
          <li
            key={choice.key}
            className={changed ? 'bg-caution-tint px-4 py-2.5' : 'border-b border-rule px-4 py-2.5 last:border-b-0'}
            title={choice.meaning}
          >
            <SelectField
              label={choice.title}
              aside={changed ? <b className="text-caution">changed</b> : undefined}
              hint={changed ? `${chosen.source}. Default: ${standard.title}.` : undefined}
              value={chosen.value}
              onChange={(event) => onChange(choice.key, event.target.value)}
            >
              {choice.values.map((one) => (
                <option key={one.value} value={one.value}>
                  {one.title}
                  {one === standard ? ' (default)' : ''}
                </option>
              ))}
            </SelectField>
          </li>
        );
      })}
    </ul>
  );
}
