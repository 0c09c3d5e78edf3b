import type { Assessment, EvidenceSign, FailureModeStatement } from '../verdict/model.ts';
import { degreesText, fixedText, PLANE_TITLES, percentText } from '../verdict/wording.ts';
import type { CliOutput } from './output.ts';

type Colours = CliOutput['colours'];

const MODE_TITLES: Readonly<Record<FailureModeStatement['mode'], string>> = {
  'shear-transverse': 'shear on the transverse plane',
  'shear-longitudinal': 'shear on the longitudinal plane',
  'normal-stress': 'normal stress on the tension plane',
  mixed: 'mixed',
  indeterminate: 'indeterminate',
  'not-attributable': 'not attributable',
};

function stressLines({ stress }: Assessment): string[] {
  if (!stress) return [];
  const { elastic, fullyPlastic, surface } = stress;
  const lines = [
    'Stress at the surface',
    `  shear stress τ   ${fixedText(surface.tauMPa, 1)} MPa  (${elastic.label})`,
    `  fully plastic    ${fixedText(fullyPlastic.shearStressMPa, 1)} MPa  (${fullyPlastic.label})`,
  ];
  if (surface.sigmaXMPa !== 0) lines.push(`  axial stress σx  ${fixedText(surface.sigmaXMPa, 1)} MPa`);
  return [
    ...lines,
    `  principal        σ1 ${fixedText(stress.sigma1MPa, 1)} MPa, σ2 ${fixedText(stress.sigma2MPa, 1)} MPa, largest shear ${fixedText(stress.maxShearMPa, 1)} MPa`,
  ];
}

function planeLines({ planes, stress }: Assessment): string[] {
  if (planes.length === 0) return [];
  return [
    'Predicted planes',
    ...planes.map((plane) => {
      const stresses = stress
        ? `  normal ${fixedText(plane.normalStressMPa, 1).padStart(7)} MPa, shear ${fixedText(plane.shearStressMPa, 1).padStart(7)} MPa`
        : '';
      return `  ${PLANE_TITLES[plane.plane].padEnd(25)}${degreesText(plane.planeAngleDeg).padStart(7)}${stresses}`;
    }),
  ];
}

const SIGNS: Readonly<Record<EvidenceSign, (text: string, colours: Colours) => string>> = {
  supports: (text, colours) => `${colours.green('+')} ${text}`,
  neutral: (text) => `· ${text}`,
  contradicts: (text, colours) => `${colours.yellow('!')} ${text}`,
};

/** The failure mode with its probability, evidence and rule. */
export function statementLines(statement: FailureModeStatement, colours: Colours): string[] {
  const { mode, modeProbabilities, evidence, reason, ruleText } = statement;
  const others = (['normal-stress', 'shear-transverse', 'shear-longitudinal'] as const)
    .map((name) => `${name} ${percentText(modeProbabilities[name])}`)
    .join(', ');
  return [
    `Failure mode: ${colours.bold(mode)} (${MODE_TITLES[mode]})`,
    ...(reason ? [`  ${reason.message}`] : []),
    `  probabilities: ${others}`,
    ...evidence.map((line) => `  ${SIGNS[line.sign](line.sentence, colours)}`),
    `  ${colours.dim(ruleText)}`,
  ];
}

/** An assessment in a technician's words: stress, planes, failure mode, notes. */
export function assessmentLines(assessment: Assessment, colours: Colours): string[] {
  return [
    ...stressLines(assessment),
    ...planeLines(assessment),
    ...(assessment.statement ? statementLines(assessment.statement, colours) : []),
    ...assessment.notes.map((note) => `Note: ${note}`),
  ];
}
