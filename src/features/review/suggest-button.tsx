import { Button } from '../../components/button.tsx';
import { useSuggesting } from '../../workspace/suggesting.tsx';

/** Begins to draw a suggestion, for readers who may comment and not edit. */
export function SuggestButton() {
  const { begin } = useSuggesting();
  return begin === undefined ? null : <Button onClick={begin}>Suggest a change</Button>;
}
