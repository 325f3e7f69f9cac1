import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import { parse } from 'papaparse';
import { fitGeneralisedPareto, meanLayerLoss } from '../../../worker/engine/fits/generalised-pareto';

/** Danish fire losses 1980 to 1990, millions of Danish krone of 1985; see fixtures/reference/README.md. */
const FILE = join(__dirname, '../../../fixtures/reference/danish-fire-losses.csv');
const losses = parse<{ loss: string }>(readFileSync(FILE, 'utf8'), {
  header: true,
  skipEmptyLines: true,
}).data.map(({ loss }) => Number(loss));

describe('Danish fire losses', () => {
  it('are the file as it was read (read): data set danishuni of fitdistrplus', () => {
    const sum = losses.reduce((total, loss) => total + loss, 0);
    expect(losses).toHaveLength(2167);
    expect(sum).toBeCloseTo(7335.486354, 6);
    expect(sum / losses.length).toBeCloseTo(3.385088304, 9);
    expect(losses.filter((loss) => loss > 10)).toHaveLength(109);
    expect(losses.filter((loss) => loss > 1)).toHaveLength(2156);
  });

  const fit = fitGeneralisedPareto(losses, 10);

  it('have a generalised Pareto tail above 10 (memory): A. J. McNeil (1997), ASTIN Bulletin 27(1)', () => {
    expect(fit.exceedances).toBe(109);
    const printed = { shape: Math.round(1e3 * fit.shape) / 1e3, scale: Math.round(1e3 * fit.scale) / 1e3 };
    expect({ ...fit, ...printed }).toEqual({ ...fit, shape: 0.497, scale: 6.975 });
  });

  it('cost a layer of 150 xs 50 0.13 a loss above 1 (memory): A. J. McNeil (1997)', () => {
    const aLoss = (109 / 2156) * meanLayerLoss(fit, 150, 50);
    expect(aLoss).toBeCloseTo(0.13, 2);
    // Refitted, to the digits of the note.
    expect(aLoss).toBeCloseTo(0.1325, 4);
  });
});

describe('a Pareto law of shape 2 and scale 2,000', () => {
  it('costs 4,400,000 in excess of 3,000 with a load of 10% on losses of 10,000,000 (read): SOA/CAS, Exam C sample question 119', () => {
    // P(X > x) = (2000/(2000 + x))² is the generalised law of shape ½ and scale 2000/2.
    const law = { threshold: 0, shape: 0.5, scale: 1000 };
    const share = meanLayerLoss(law, Infinity, 3000) / meanLayerLoss(law, Infinity, 0);
    expect(1.1 * 10_000_000 * share).toBeCloseTo(4_400_000, 6);
  });
});
