import { createContext, useContext } from 'react';
import type { Price } from './use-price';

export const PriceContext = createContext<Price | null>(null);

/** The price page's state. @throws outside the page: a fault of the code */
export function usePriceState(): Price {
  const price = useContext(PriceContext);
  if (!price) throw new Error('a part of the price page stands outside it');
  return price;
}
