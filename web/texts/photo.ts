import type { PhotoNotMeasured } from '../../src/records/reading.ts';

export const PHOTO = {
  title: 'Photo',
  stageLabel: (fileName: string) => `Photo ${fileName} with axis, specimen edges and fracture trace`,
  add: 'Add photos',
  take: 'Take a photo',
  dropHere: 'Drop photos of the break here',
  dropDetail: 'JPEG, PNG, WebP, TIFF or HEIC. The plane angle is measured from each one.',
  sending: (percent: number) => `Sending … ${percent} %`,
  measuring: 'Measuring …',
  measureAgain: 'Measure again',
  notMeasured: 'This photo was not measured',
  setByHand: 'Set the trace by hand',
  correct: 'Correct the trace by hand',
  howTo: 'How to photograph a break',
  showReading: 'Reading shown on the photo',
  zoomIn: 'Zoom in',
  zoomOut: 'Zoom out',
  showAll: 'Whole photo',
  showBreak: 'The break',
  overlay: 'Overlay',
  legend: { axis: 'Axis', edge: 'Specimen edges', trace: 'Fracture trace', fit: 'Fitted trace' },
  photoOf: (index: number, count: number, fileName: string) => `Photo ${index} of ${count}: ${fileName}`,
  unreadable: 'There is nothing to show: this file could not be read as a photo.',
} as const;

export const CORRECTION = {
  title: 'Trace by hand',
  help: 'Drag the axis ends onto the middle line, an edge handle onto the edge of the specimen, and the points onto the trace. Arrow keys move the selected handle by 1 px, with Shift by 10 px; Delete takes a point away, Insert adds one.',
  addPoints: 'Add points',
  addPointsHint: 'Every tap on the photo adds a point to the trace.',
  removePoint: 'Remove point',
  fewest: (count: number) => `The trace needs at least ${count} points.`,
  undo: 'Undo',
  redo: 'Redo',
  startAgain: 'Start again',
  diameter: 'Diameter, px',
  x: 'x, px',
  y: 'y, px',
  selected: 'Selected',
  nothingSelected: 'Nothing selected',
  operator: 'Operator',
  remarks: 'Remarks',
  save: 'Save as a reading by hand',
  saving: 'Saving …',
  leave: 'Leave without saving',
  saved: 'Saved. The reading by hand is kept beside the automatic one.',
  numberExpected: (from: number, to: number) => `a number from ${from} to ${to}`,
  handle: {
    a: 'Axis, first end',
    b: 'Axis, second end',
    axis: 'Axis as a whole',
    upper: 'Specimen edge, first side',
    lower: 'Specimen edge, second side',
    trace: (index: number, count: number) => `Trace point ${index} of ${count}`,
    at: (name: string, x: string, y: string) => `${name}, x ${x} px, y ${y} px`,
  },
} as const;

type NotMeasuredCode = PhotoNotMeasured['reason']['code'];

/** What to do about each reason, in a technician's words. */
export const WHAT_TO_DO: Readonly<Record<NotMeasuredCode, string>> = {
  'no-specimen':
    'Lay the specimen on a matte background unlike itself, with both of its edges in view, and photograph it from the side.',
  'no-fracture':
    'Bring the break into the middle of the photo, two diameters of the specimen on each side of it. Leave a small gap between the two halves.',
  'fracture-cut-off':
    'Step back or shift the camera: the whole break and two diameters on each side belong in the frame.',
  'too-blurred': 'Rest the camera on something, let it focus on the specimen, and take the photo again in more light.',
  'too-small': 'Zoom in: the specimen should be at least 120 px across, better 250.',
  'too-dark': 'Add diffuse light, for instance from a window or through paper.',
  'over-exposed': 'Take away the direct lamp or lower the exposure until the specimen shows its surface.',
  ambiguous: 'Take everything else out of the picture, or set the trace by hand on this photo.',
  'not-a-photo': 'Send a JPEG, PNG, WebP, TIFF or HEIC photo that opens elsewhere.',
  'too-many-pixels': 'Send the photo in a smaller size; 12 megapixels are plenty.',
  fault: 'Measure it once more. If it fails again, set the trace by hand and report the photo.',
};

/** Framing advice, in the order one works at the bench. */
export const HOW_TO_PHOTOGRAPH = {
  title: 'How to photograph a break',
  lead: 'The angle can only be as good as the photo. Five things matter, in this order.',
  steps: [
    {
      title: 'From the side, square to the axis',
      text: 'Hold the camera square to the axis and a good ten diameters away. Zoom in rather than come close.',
    },
    { title: 'A background unlike the specimen', text: 'Matte and plain. No rule or label touching the specimen.' },
    {
      title: 'Soft light',
      text: 'Diffuse light, no hard shadow along the specimen, no bright streak across the break.',
    },
    {
      title: 'Large enough',
      text: 'The specimen at least 120 px across, better 250. The whole break and two diameters on each side in view.',
    },
    {
      title: 'Two halves with a small gap',
      text: 'End to end on a V-block or against a rule, turned so that the trace runs on across the gap. Never pressed together: that destroys the evidence on the surfaces. One half alone is fine, with its broken end inside the frame.',
    },
  ],
  second: 'A second photo from the other side helps: agreement between the two is evidence.',
  chalkTitle: 'Which way did it turn? The chalk rule',
  chalk: [
    'Face the end of the specimen that the machine turns. If it turns counter-clockwise, enter “counter-clockwise”: positive torque.',
    'Draw a chalk line along a bar and twist it by hand to see it: facing the end you turn counter-clockwise, a brittle break leans like “/” when the bar lies across in front of you, a left-hand helix, θ near +45°.',
    'Turning the photo upside down changes nothing. A mirrored photo (some selfie cameras) flips the sign.',
  ],
} as const;
