import { Button } from './button.tsx';
import { ErrorNotice } from './notice.tsx';

interface ReadingStateProps {
  /** What is read, such as 'The sessions'. */
  readonly what: string;
  readonly query: {
    readonly error: Error | null;
    readonly isFetching: boolean;
    readonly refetch: () => unknown;
  };
}

/** In place of what is not there yet: that it is being read, or why it couldn't be and a way to try again. */
export function ReadingState({ what, query: { error, isFetching, refetch } }: ReadingStateProps) {
  if (error === null) {
    return (
      <p role="status" className="py-16 text-base text-ink-2">
        {what} are being read…
      </p>
    );
  }
  return (
    <ErrorNotice
      action={
        <Button small busy={isFetching} onClick={() => void refetch()}>
          Try again
        </Button>
      }
    >
      {what} could not be read. {error.message}
    </ErrorNotice>
  );
}
