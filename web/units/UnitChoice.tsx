import { createContext, type ReactNode, useContext, useState } from 'react';
import { COMMON } from '../texts/common.ts';
import { UNIT_SYSTEMS, type UnitSystem } from './unitSystem.ts';

const KEPT_AS = 'breakplane.units';

interface Units {
  readonly system: UnitSystem;
  readonly choose: (system: UnitSystem) => void;
}

const UnitsContext = createContext<Units>({ system: 'si', choose: () => {} });

/** The unit system chosen on this device. */
export const useUnits = (): Units => useContext(UnitsContext);

export function UnitsProvider({ children }: { readonly children: ReactNode }) {
  const [system, setSystem] = useState<UnitSystem>(readKept);
  const choose = (chosen: UnitSystem) => {
    setSystem(chosen);
    try {
      window.localStorage.setItem(KEPT_AS, chosen);
    } catch {
      // A browser that keeps nothing still shows the units chosen now.
    }
  };
  return <UnitsContext value={{ system, choose }}>{children}</UnitsContext>;
}

function readKept(): UnitSystem {
  try {
    return window.localStorage.getItem(KEPT_AS) === 'us' ? 'us' : 'si';
  } catch {
    return 'si';
  }
}

/** Two buttons; the pressed one is in use everywhere on the page. */
export function UnitChoice() {
  const { system, choose } = useUnits();
  return (
    <fieldset className="unit-choice">
      <legend className="visually-hidden">{COMMON.units}</legend>
      {UNIT_SYSTEMS.map((candidate) => (
        <button key={candidate} type="button" aria-pressed={candidate === system} onClick={() => choose(candidate)}>
          {COMMON.unitSystem[candidate]}
        </button>
      ))}
    </fieldset>
  );
}
