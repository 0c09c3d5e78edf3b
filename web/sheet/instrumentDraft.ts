import { LabError } from '../../src/errors.ts';
import { parseQuantity } from '../../src/units.ts';
import { INSTRUMENT } from '../texts/readings.ts';

/** The form of a reading made with an instrument, as typed. */
export interface InstrumentDraft {
  readonly angle: string;
  readonly uncertainty: string;
  readonly instrument: string;
  readonly operator: string;
  readonly remarks: string;
}

export const EMPTY_INSTRUMENT: InstrumentDraft = {
  angle: '',
  uncertainty: '',
  instrument: '',
  operator: '',
  remarks: '',
};

export interface CheckedInstrument {
  readonly reading: {
    readonly method: 'instrument';
    readonly planeAngleDeg: number;
    readonly expandedUncertaintyDeg: number;
    readonly instrument: string;
    readonly operator?: string;
    readonly remarks?: string;
  } | null;
  readonly messages: Readonly<Partial<Record<'angle' | 'uncertainty' | 'instrument', string>>>;
}

/** Plane angles lie in (−90, 90] degrees; an uncertainty is over 0. */
export function checkInstrument(draft: InstrumentDraft): CheckedInstrument {
  const planeAngleDeg = degrees(draft.angle);
  const expandedUncertaintyDeg = degrees(draft.uncertainty);
  const instrument = draft.instrument.trim();
  const angleRight = planeAngleDeg > -90 && planeAngleDeg <= 90;
  const uncertaintyRight = expandedUncertaintyDeg > 0 && expandedUncertaintyDeg <= 90;
  const messages = {
    ...(angleRight ? {} : { angle: INSTRUMENT.angleExpected }),
    ...(uncertaintyRight ? {} : { uncertainty: INSTRUMENT.uncertaintyExpected }),
    ...(instrument === '' ? { instrument: INSTRUMENT.instrumentExpected } : {}),
  };
  if (Object.keys(messages).length > 0) return { reading: null, messages };
  return {
    messages,
    reading: {
      method: 'instrument',
      planeAngleDeg,
      expandedUncertaintyDeg,
      instrument,
      ...(draft.operator.trim() === '' ? {} : { operator: draft.operator.trim() }),
      ...(draft.remarks.trim() === '' ? {} : { remarks: draft.remarks.trim() }),
    },
  };
}

/** NaN for anything that is no angle; 44°30′ and 0.78 rad are. */
function degrees(text: string): number {
  try {
    return parseQuantity(text, 'angle', { defaultUnit: 'deg' });
  } catch (error) {
    if (error instanceof LabError) return Number.NaN;
    throw error;
  }
}
