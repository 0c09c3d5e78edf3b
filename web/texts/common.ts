/** Words used all over the page. Trade words are those of the glossary in DEVELOPERS.md. */
export const COMMON = {
  program: 'Breakplane',
  units: 'Units',
  unitSystem: { si: 'SI', us: 'US' },
  tests: 'Tests',
  newTest: 'Enter a test',
  importLog: 'Import a log',
  photoHelp: 'How to photograph',
  tryAgain: 'Try again',
  save: 'Save',
  cancel: 'Cancel',
  loading: 'Loading …',
  none: '–',
  whatToDo: 'What to do',
  skipToContent: 'Skip to the content',
  noSuchPlace: 'There is no page at this address.',
  leaveUnsaved: 'There are changes that are not saved yet. Leave and lose them?',
} as const;

/** The cautions, on every sheet and in every report. */
export const CAUTIONS = {
  title: 'Cautions',
  sentences: [
    'A specimen under torque stores energy. When it breaks, pieces can fly and the machine springs back: guards closed, eyes protected, nobody in line with the specimen.',
    'Broken ends are sharp and may be hot. Handle them with gloves, and do not press the two halves together: that destroys the evidence on the fracture surfaces.',
    'The failure mode shown here is a proposal until an authorised person has reviewed and accepted it.',
    'The governing test standard and the rules of your laboratory come first.',
  ],
} as const;
