import { mkdir } from 'node:fs/promises';
import { Command } from 'commander';
import { LabError } from '../../errors.ts';
import type { MeasureJob } from '../../photo/measurement.ts';
import { type ByHandTexts, byHandOptions } from '../byHand.ts';
import type { CommandContext } from '../context.ts';
import { EXIT } from '../exitStatus.ts';
import { type MeasuredPhoto, measureInOrder } from '../measureInOrder.ts';
import { measurementLines } from '../measurementText.ts';
import { showProgress } from '../progress.ts';
import { quantityOf, roundGeometryOf, torqueDirectionOf, wholeNumber } from './options.ts';

interface MeasureFlags extends ByHandTexts {
  readonly diameter?: string;
  readonly torqueDirection?: string;
  readonly debug?: string;
  readonly workers?: string;
  readonly json?: boolean;
}

const EXAMPLES = `
Examples:
  breakplane measure broken.jpg
  breakplane measure photos/*.jpg --json > planes.jsonl
  breakplane measure broken.jpg --diameter 12.7mm --torque-direction ccw
  breakplane measure broken.jpg --axis 210,540,1390,548 --diameter-px 212 --trace "760,440 812,545 861,648"

One photo, one line, in the order given; a photo that cannot be measured gets its line with the reason.
Exit status: 0 every photo was measured, 3 at least one was not, 2 wrong usage.`;

type JobOptions = NonNullable<MeasureJob['options']>;

function jobOptions(photos: readonly string[], flags: MeasureFlags, diameterMm: number | null): JobOptions {
  const byHand = byHandOptions(flags);
  if (byHand && photos.length !== 1) {
    throw new LabError('usage', `--axis and --trace belong to exactly one photo, got ${photos.length} photos`, {
      input: 'axis',
    });
  }
  return {
    ...(diameterMm !== null && { diameterMm }),
    ...(byHand && { byHand }),
    ...(flags.debug !== undefined && { debugDirectory: flags.debug }),
  };
}

/** `breakplane measure`: photos → plane angles, one line a photo. */
export function measureCommand(context: CommandContext): Command {
  const { ports, output } = context;
  return new Command('measure')
    .description('Measure the plane of the break on photos of broken specimens')
    .argument('<photo...>', 'photos: JPEG, PNG, WebP, TIFF or HEIC')
    .option('--diameter <length>', 'outside diameter with its unit, such as 12.7mm or 0.5in')
    .option('--torque-direction <ccw|cw>', 'as seen facing the driven end; says what the angle means')
    .option('--axis <x,y,x,y>', 'by hand: the two ends of the axis, px of the upright photo')
    .option('--diameter-px <px>', 'by hand: diameter of the specimen on the photo, px')
    .option('--trace <"x,y x,y …">', 'by hand: points of the fracture trace, px')
    .option('--debug <dir>', 'write the stages of the measurement as pictures into this folder')
    .option('--workers <number>', 'photos measured at the same time (default: as the cores allow)')
    .option('--json', 'one JSON object a line')
    .addHelpText('after', EXAMPLES)
    .action(async (photos: string[], flags: MeasureFlags) => {
      const torqueDirection = torqueDirectionOf(flags.torqueDirection);
      const diameterMm = quantityOf('--diameter', flags.diameter, 'length');
      const geometry = roundGeometryOf(diameterMm, null);
      const loads = torqueDirection || geometry ? { torqueDirection, geometry } : null;
      const options = jobOptions(photos, flags, diameterMm);
      const size = flags.workers === undefined ? undefined : wholeNumber('--workers', flags.workers, 1, 64);
      if (flags.debug !== undefined) await mkdir(flags.debug, { recursive: true });
      const pool = ports.createMeasurePool(size === undefined ? {} : { size });
      const progress = showProgress(output, 'photos', photos.length);
      const write = (photo: MeasuredPhoto): void => {
        if (photo.measurement.outcome === 'not-measured') context.status = EXIT.partly;
        progress.pauseFor(() => {
          if (flags.json) output.line(JSON.stringify({ file: photo.file, ...photo.measurement }));
          else for (const line of measurementLines(photo, loads, output.colours)) output.line(line);
        });
      };
      try {
        await measureInOrder({
          photos,
          pool,
          options,
          atOnce: 2 * (size ?? 8),
          onDone: progress.step,
          onResult: write,
          stop: () => output.readerGone,
        });
      } finally {
        progress.end();
        await pool.close();
      }
    });
}
