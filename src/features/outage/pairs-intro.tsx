import { Button } from '../../components/button.tsx';
import { mostPairs } from './failure-run.ts';

/** What failing two at once would show, and the button that does it. */
export function PairsIntro({ onStart }: { readonly onStart: () => void }) {
  return (
    <div className="flex max-w-560 flex-col items-start gap-10 text-base text-ink-2">
      <p>
        A spare hides what it stands in for: neither harms alone, together they do. This fails everything two
        by two except whole sites and hosts, and lists those that part more together than added up. At most{' '}
        {mostPairs} pairs are tried, of what most hangs on.
      </p>
      <Button onClick={onStart}>Fail them two by two</Button>
    </div>
  );
}
