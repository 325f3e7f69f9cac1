import type { Request } from 'express';
import { HttpProblem } from './problem';

/**
 * Refuses an act by cookie that another site could have caused: it needs a header of ours, which no form can send, and
 * where the browser names an origin, that must be ours.
 */
export function refuseCrossSite(req: Request, publicUrl: string): void {
  if (req.method === 'GET' || req.method === 'HEAD') return;
  const origin = req.get('origin');
  const ownOrigins = [new URL(publicUrl).origin, `${req.protocol}://${req.get('host') ?? ''}`];
  if (req.get('x-leanyear-request') !== '1' || (origin !== undefined && !ownOrigins.includes(origin))) {
    throw new HttpProblem(403, 'Not allowed', 'This request did not come from our own pages.');
  }
}
