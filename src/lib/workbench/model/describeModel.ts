import type { ModelStructure } from '$lib/contracts/content';
import { listWords } from '$lib/study';

type Piece = { text: string } | { strong: string } | { species: 'first' | 'second' };

const growthWords = {
  exponential: 'grows without a ceiling',
  logistic: 'grows towards a ceiling',
  allee: 'fails when too few',
  mortality: 'lives on it alone',
  leslie: 'follows it as its ceiling'
} as const;
const feedingWords = {
  'holling-1': 'in proportion to what there is',
  'holling-2': 'up to a ration',
  'holling-3': 'little while it is scarce, then up to a ration'
} as const;

/** The structure in one sentence, present tense: who grows how, how they meet, what is taken or added. */
export function describeModel(structure: ModelStructure): Piece[] {
  const { first, second } = structure;
  const managed = (['first', 'second'] as const).flatMap((species) => {
    const s = structure[species];
    const done = [s.effort && 'a removal rate', s.quota && 'a quota', s.stocking && 'stocking'].filter(
      (w): w is string => Boolean(w)
    );
    return done.length ? [{ species, done: listWords(done) }] : [];
  });
  const pieces: Piece[] =
    structure.interaction === 'competition'
      ? [
          { text: 'The ' },
          { species: 'first' },
          { text: ' and the ' },
          { species: 'second' },
          { text: ' ' },
          { strong: 'compete' },
          {
            text:
              first.growth === second.growth
                ? `; each ${growthWords[first.growth]}`
                : `; the first ${growthWords[first.growth]}, the second ${growthWords[second.growth]}`
          }
        ]
      : [
          { text: 'The ' },
          { species: 'second' },
          { text: ' ' },
          { strong: 'eats' },
          { text: ' the ' },
          { species: 'first' },
          { text: ` ${feedingWords[structure.feeding.response]}; the first ${growthWords[first.growth]}, the second ` },
          { text: second.growth === 'logistic' ? 'has other food too' : growthWords[second.growth] }
        ];
  managed.forEach(({ species, done }, i) => {
    pieces.push({ text: i === 0 ? '. Management: ' : ', and ' }, { text: `${done} on the ` }, { species });
  });
  return [...pieces, { text: '.' }];
}
