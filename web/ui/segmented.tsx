import { Radio, RadioGroup } from '@headlessui/react';
import { classNames } from '../lib/class-names.ts';

interface SegmentedProps<Value extends string> {
  label: string;
  value: Value;
  options: readonly { value: Value; label: string; disabledReason?: string }[];
  onChange: (value: Value) => void;
  size?: 'small' | 'medium';
  className?: string;
}

/** One of a few: Ink fill is the chosen one. Arrow keys move. */
export function Segmented<Value extends string>({
  label,
  value,
  options,
  onChange,
  size = 'small',
  className,
}: SegmentedProps<Value>) {
  return (
    <RadioGroup
      aria-label={label}
      value={value}
      onChange={onChange}
      className={classNames(
        'inline-flex overflow-hidden rounded-2 border border-rule-strong bg-sheet text-13',
        className,
      )}
    >
      {options.map((option) => (
        <Radio
          key={option.value}
          value={option.value}
          disabled={option.disabledReason !== undefined}
          title={option.disabledReason}
          className={classNames(
            'flex flex-1 cursor-pointer items-center justify-center border-l border-rule px-2.5 whitespace-nowrap text-ink-2 first:border-l-0 hover:bg-hover',
            'focus:outline-none focus-visible:outline-2 focus-visible:-outline-offset-3 focus-visible:outline-(--focus)',
            'data-checked:bg-ink data-checked:font-bold data-checked:text-(--page) data-checked:focus-visible:outline-(--page)',
            'data-disabled:cursor-not-allowed data-disabled:italic',
            size === 'small' ? 'h-7.5 pointer-coarse:h-10.5' : 'h-9 px-3.5 pointer-coarse:h-11',
          )}
        >
          {option.label}
        </Radio>
      ))}
    </RadioGroup>
  );
}
