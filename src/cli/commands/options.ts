import { Option } from 'commander';
import type { z } from 'zod';
import { LabError } from '../../errors.ts';
import type { TorqueDirection as TorqueDirectionSchema } from '../../records/test.ts';
import type { CliPorts } from '../ports.ts';

type TorqueDirection = z.infer<typeof TorqueDirectionSchema>;

/** `--data DIR`: the laboratory's data folder; `BREAKPLANE_DATA` or `.data` when it is not given. */
export function dataDirOption(ports: CliPorts): Option {
  return new Option('--data <dir>', 'data folder of the laboratory (also BREAKPLANE_DATA)').default(
    ports.env.BREAKPLANE_DATA || '.data',
  );
}

/** Reads a plain number typed after an option. @throws LabError `not-a-number` naming the option */
export function numberOf(option: string, text: string): number {
  const value = Number(text.trim().replace(/^\+/, '').replace(',', '.'));
  if (text.trim() === '' || !Number.isFinite(value)) {
    throw new LabError('not-a-number', `${option} must be a number, got "${text}"`, { input: option, value: text });
  }
  return value;
}

/** Reads a whole number typed after an option. @throws LabError `out-of-range` */
export function wholeNumber(option: string, text: string, from: number, to: number): number {
  const value = numberOf(option, text);
  if (!Number.isInteger(value) || value < from || value > to) {
    throw new LabError('out-of-range', `${option} must be a whole number from ${from} to ${to}, got "${text}"`, {
      input: option,
      value: text,
    });
  }
  return value;
}

/** `ccw` or `cw`, in a few spellings. @throws LabError `usage` */
export function torqueDirectionOf(text: string | undefined): TorqueDirection | null {
  if (text === undefined) return null;
  const direction = text
    .trim()
    .toLowerCase()
    .replace(/[\s_-]/g, '');
  if (['ccw', 'counterclockwise', 'anticlockwise', '+'].includes(direction)) return 'ccw';
  if (['cw', 'clockwise', '-'].includes(direction)) return 'cw';
  throw new LabError('usage', `--torque-direction must be ccw or cw (facing the driven end), got "${text}"`, {
    input: '--torque-direction',
    value: text,
  });
}
