import type { Step } from '../world';
import { beastHeads, gougeQuestions, museumHilt, unmarkedSword } from './asking';
import { rivetedDagger, socketedAxe } from './delivered';
import { flatAxe, spearheads } from './leaving';
import { linstocks, maceHead, parkPalstaves, sickle } from './making';
import { cancelledSword, leafShapedSword } from './swords';

/** The fourteen commissions of the demo, each as its steps in order. */
export const STORIES: readonly (readonly Step[])[] = [
  socketedAxe,
  rivetedDagger,
  spearheads,
  beastHeads,
  flatAxe,
  parkPalstaves,
  cancelledSword,
  leafShapedSword,
  maceHead,
  linstocks,
  sickle,
  museumHilt,
  gougeQuestions,
  unmarkedSword,
];
