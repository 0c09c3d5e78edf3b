import type { Hand } from '../../src/angle.ts';
import type { FractureShape, ReadingMethod } from '../../src/records/reading.ts';
import type { EvidenceSign, FailureMode, PredictedPlaneName } from '../../src/verdict/model.ts';

export const MODE: Readonly<Record<FailureMode, string>> = {
  'shear-transverse': 'Shear, transverse plane',
  'shear-longitudinal': 'Shear, longitudinal plane',
  'normal-stress': 'Normal stress, tension plane',
  mixed: 'Mixed',
  indeterminate: 'Indeterminate',
  'not-attributable': 'Not attributable',
};

export const MODE_SHORT: Readonly<Record<FailureMode, string>> = {
  'shear-transverse': 'Shear, transverse',
  'shear-longitudinal': 'Shear, longitudinal',
  'normal-stress': 'Normal stress',
  mixed: 'Mixed',
  indeterminate: 'Indeterminate',
  'not-attributable': 'Not attributable',
};

export const PLANE: Readonly<Record<PredictedPlaneName, string>> = {
  tension: 'Tension plane',
  compression: 'Compression plane',
  'shear-transverse': 'Shear plane, transverse',
  'shear-longitudinal': 'Shear plane, longitudinal',
};

export const SHAPE: Readonly<Record<FractureShape, string>> = {
  helix: 'helix',
  plane: 'flat cut',
  longitudinal: 'longitudinal split',
  mixed: 'mixed trace',
};

export const HAND: Readonly<Record<Hand, string>> = {
  left: 'left-hand, leans “/”',
  right: 'right-hand, leans “\\”',
  none: 'no hand',
};

export const METHOD: Readonly<Record<ReadingMethod, string>> = {
  'photo-automatic': 'Photo, automatic',
  'photo-hand': 'Photo, trace by hand',
  instrument: 'Instrument',
};

export const EVIDENCE_SIGN: Readonly<Record<EvidenceSign, string>> = {
  supports: 'Supports',
  neutral: 'Neutral',
  contradicts: 'Contradicts',
};
