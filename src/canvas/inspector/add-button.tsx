import { Button } from '../../components/button.tsx';
import { Icon } from '../../components/icon.tsx';

interface AddButtonProps {
  readonly onClick: () => void;
  readonly children: string;
  /** Said to screen readers after the words. */
  readonly subject?: string;
  readonly disabled?: boolean;
}

/** A small button that adds to a list. */
export function AddButton({ onClick, children, subject, disabled }: AddButtonProps) {
  return (
    <Button
      kind="quiet"
      small
      disabled={disabled}
      icon={<Icon name="plus" size={14} />}
      className="self-start"
      aria-label={subject === undefined ? undefined : `${children} ${subject}`}
      onClick={onClick}
    >
      {children}
    </Button>
  );
}
