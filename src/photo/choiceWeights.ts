/** Weights of a logistic regression: natural logarithm of the odds that a reading is right, a unit of each feature. */
export const CHOICE_WEIGHTS: Readonly<Record<'pair' | 'half', Readonly<Record<string, number>>>> = {
  pair: { constant: 0 },
  half: { constant: 0 },
};
