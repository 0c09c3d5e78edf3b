import { Command } from 'commander';
import { LabError } from '../../errors.ts';
import { torqueWithDirection } from '../../log/torqueDirection.ts';
import type { TestLoads } from '../../mechanics/surfaceStress.ts';
import { assessReading } from '../../verdict/assessReading.ts';
import { classifyAngle } from '../../verdict/classifyAngle.ts';
import type { Assessment, DecisionRule } from '../../verdict/model.ts';
import { assessmentLines } from '../assessmentText.ts';
import type { CommandContext } from '../context.ts';
import { numberOf, quantityOf, roundGeometryOf, torqueDirectionOf } from './options.ts';

interface ClassifyFlags {
  readonly torque?: string;
  readonly diameter?: string;
  readonly bore?: string;
  readonly axialForce?: string;
  readonly bendingMoment?: string;
  readonly torqueDirection?: string;
  readonly angle?: string;
  readonly angleUncertainty?: string;
  readonly coverageFactor: string;
  readonly minimumProbability?: string;
  readonly json?: boolean;
}

const EXAMPLES = `
Examples:
  breakplane classify --torque 85N.m --diameter 12mm --angle 44 --angle-uncertainty 2
  breakplane classify --torque "750 lbf·in" --diameter 0.5in --bore 0.3in --torque-direction cw --angle -43 --angle-uncertainty 3
  breakplane classify --torque 85N.m --diameter 12mm --axial-force 5kN --json
  breakplane classify --angle 44 --angle-uncertainty 2      (no torque known: the planes of pure torsion)

The plane angle is the angle between the plane's normal and the axis: 0 is square to the axis, +45 leans like "/".`;

function loadsOf(flags: ClassifyFlags): TestLoads {
  const stated = torqueDirectionOf(flags.torqueDirection);
  const signedTorqueNm = quantityOf('--torque', flags.torque, 'torque');
  const torque =
    signedTorqueNm === null
      ? { torqueMaxNm: null, torqueDirection: stated }
      : torqueWithDirection(signedTorqueNm, stated, '--torque');
  const geometry = roundGeometryOf(
    quantityOf('--diameter', flags.diameter, 'length'),
    quantityOf('--bore', flags.bore, 'length'),
  );
  return {
    ...torque,
    geometry,
    axialForceN: quantityOf('--axial-force', flags.axialForce, 'force'),
    bendingMomentNm: quantityOf('--bending-moment', flags.bendingMoment, 'torque'),
  };
}

function assess(flags: ClassifyFlags, loads: TestLoads): Assessment {
  const rule: Partial<DecisionRule> =
    flags.minimumProbability === undefined
      ? {}
      : { minimumProbability: numberOf('--minimum-probability', flags.minimumProbability) };
  const planeAngleDeg = quantityOf('--angle', flags.angle, 'angle');
  const expandedUncertaintyDeg = quantityOf('--angle-uncertainty', flags.angleUncertainty, 'angle');
  if (planeAngleDeg === null) {
    if (expandedUncertaintyDeg !== null) {
      throw new LabError('usage', '--angle-uncertainty must come with --angle, got no angle', { input: '--angle' });
    }
    return assessReading(loads, null, { rule });
  }
  if (expandedUncertaintyDeg === null) {
    throw new LabError(
      'missing-value',
      '--angle must come with its expanded uncertainty, such as --angle-uncertainty 2 (k = 2): the rule needs to know how sure the angle is',
      { input: '--angle-uncertainty' },
    );
  }
  if (!(expandedUncertaintyDeg >= 0)) {
    throw new LabError(
      'out-of-range',
      `--angle-uncertainty must be an expanded uncertainty ≥ 0 deg, got ${flags.angleUncertainty}`,
      { input: '--angle-uncertainty', value: flags.angleUncertainty },
    );
  }
  const coverageFactor = numberOf('--coverage-factor', flags.coverageFactor);
  return classifyAngle({ ...loads, planeAngleDeg, expandedUncertaintyDeg, coverageFactor }, { rule });
}

/** The JSON answer: the statement's main parts by name, then everything it rests on. */
function jsonAnswer(loads: TestLoads, { statement, ...assessment }: Assessment): string {
  const flags = statement?.evidence.filter((line) => line.sign === 'contradicts') ?? [];
  return JSON.stringify({
    failureMode: statement?.mode ?? null,
    probability: statement?.probability ?? null,
    probabilities: statement?.modeProbabilities ?? null,
    flags: flags.map(({ code, sentence }) => ({ code, message: sentence })),
    loads,
    stress: assessment.stress,
    planes: assessment.planes,
    statement,
    notes: assessment.notes,
  });
}

/** `breakplane classify`: loads and an angle → stress state, predicted planes, probabilities and failure mode. */
export function classifyCommand({ output }: CommandContext): Command {
  return new Command('classify')
    .description('State the failure mode for a torque, a section and a plane angle')
    .option('--torque <torque>', 'largest torque with its unit, such as 85N.m or "750 lbf·in"; below zero: clockwise')
    .option('--diameter <length>', 'outside diameter with its unit')
    .option('--bore <length>', 'bore diameter of a tube')
    .option('--axial-force <force>', 'axial force beside the torque, tension positive')
    .option('--bending-moment <moment>', 'bending moment beside the torque')
    .option('--torque-direction <ccw|cw>', 'as seen facing the driven end')
    .option('--angle <degrees>', 'measured plane angle; without it only stress and planes are shown')
    .option('--angle-uncertainty <degrees>', 'expanded uncertainty of the angle')
    .option('--coverage-factor <k>', 'coverage factor of the expanded uncertainty', '2')
    .option('--minimum-probability <p>', "the laboratory's own limit for stating a mode (default: 0.95)")
    .option('--json', 'one JSON object')
    .addHelpText('after', EXAMPLES)
    .action((flags: ClassifyFlags) => {
      const loads = loadsOf(flags);
      const assessment = assess(flags, loads);
      if (flags.json) output.line(jsonAnswer(loads, assessment));
      else for (const line of assessmentLines(assessment, output.colours)) output.line(line);
    });
}
