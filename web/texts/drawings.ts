export const DRAWING = {
  framing:
    'Side view of two halves end to end with a small gap; the break in the middle, two diameters in view on each side.',
  trace: 'fracture trace',
  axis: 'axis x',
  chalk:
    'A bar lying across. Facing its right end, that end is turned counter-clockwise; the break leans like a forward slash, θ near +45°.',
  leans: 'leans “/”, θ ≈ +45°',
  ccw: ['turned', 'ccw, T > 0'],
} as const;
