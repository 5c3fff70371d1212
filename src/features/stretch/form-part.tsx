import type { ReactNode } from 'react';
import { Button } from '../../components/button.tsx';
import { Icon } from '../../components/icon.tsx';
import type { StretchForm } from '../../engine/stretch/stretch-form.ts';
import type { Problem } from '../../engine/wire/problem.ts';

/** What every part of the form gets: the form, what is wrong with it, and how to change it. */
export interface FormPartProps {
  readonly form: StretchForm;
  readonly problems: readonly Problem[];
  readonly onChange: (form: StretchForm) => void;
}

/** One step of the form, with what adds a row to it. */
export function FormPart({
  title,
  beside,
  children,
}: {
  readonly title: string;
  readonly beside?: ReactNode;
  readonly children: ReactNode;
}) {
  return (
    <section aria-label={title} className="flex flex-col gap-8">
      <div className="flex min-h-24 items-center justify-between gap-8">
        <h3 className="text-section font-semibold">{title}</h3>
        {beside}
      </div>
      {children}
    </section>
  );
}

export function RemoveButton({ of, onClick }: { readonly of: string; readonly onClick: () => void }) {
  return (
    <Button
      kind="quiet"
      small
      iconOnly
      aria-label={`Remove ${of}`}
      icon={<Icon name="cross" size={13} />}
      onClick={onClick}
    />
  );
}

export function AddButton({
  disabled = false,
  onClick,
  children,
}: {
  readonly disabled?: boolean;
  readonly onClick: () => void;
  readonly children: ReactNode;
}) {
  return (
    <Button small disabled={disabled} icon={<Icon name="plus" size={13} />} onClick={onClick}>
      {children}
    </Button>
  );
}

/** A list with one entry replaced. */
export const replaced = <T,>(list: readonly T[], at: number, entry: T): readonly T[] =>
  list.map((each, i) => (i === at ? entry : each));

/** An entry with an optional field set, or without it where it is unknown. */
export const withField = <T extends object, K extends keyof T>(
  entry: T,
  field: K,
  value: T[K] | undefined,
): T => {
  const { [field]: _old, ...rest } = entry;
  return (value === undefined ? rest : { ...rest, [field]: value }) as T;
};
