import { useEffect, useState } from 'react';
import { rangeWords, taxWords, weeksWords } from '../../commission/pricing/shown-price';
import { usePriceState } from './price-context';

const PAUSE_MS = 900;

/** Says the new range to a screen reader once the inputs have rested, never at the first look. */
export function LiveRange() {
  const { estimate, live } = usePriceState();
  const words = estimate ? `Now ${rangeWords(estimate)}, ${taxWords(estimate)}; ${weeksWords(estimate)}.` : '';
  const [first] = useState(words);
  const [said, setSaid] = useState('');
  useEffect(() => {
    if (!live || (said === '' && words === first)) return;
    const timer = setTimeout(() => setSaid(words), PAUSE_MS);
    return () => clearTimeout(timer);
  }, [words, first, said, live]);
  return (
    <p className="sr-only" role="status">
      {said}
    </p>
  );
}
