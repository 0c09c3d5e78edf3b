/** The usual cautions; they stand in every document, on the page and in the README. */
export const CAUTIONS: readonly string[] = [
  'A specimen under torque stores energy. When it breaks, pieces can fly and the machine springs back: guards closed, eyes protected, nobody in line with the specimen.',
  'Broken ends are sharp and may be hot. Handle them with gloves, and do not press the two halves together: that destroys the evidence on the fracture surfaces.',
  'The failure mode stated here is a proposal until an authorised person has reviewed and accepted it.',
  'The governing test standard and the rules of the laboratory come first.',
];
