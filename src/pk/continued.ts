import type { IntegrationTolerance } from './fluxTolerance'
import { integrate } from './integrate'
import { IntegratedPiece } from './integratedPiece'
import type { Segment } from './segment'
import type { Trajectory } from './trajectory'

/** What lies beyond an earlier course is looked at for when it comes near, not for its digits. */
export const CONTINUED_TOLERANCE: IntegrationTolerance = { relative: 1e-5, floor: 1e-2 }

/**
 * An integrated trajectory over segments that begin as an earlier one's: its pieces as they are, as far as nothing
 * differs, and what follows integrated at 1e-5.
 */
export function continuedTrajectory(segments: readonly Segment[], earlier: Trajectory): Trajectory {
  const { pieces, initial } = earlier
  let same = 0
  while (same < pieces.length && same < segments.length && areSame(pieces[same].segment, segments[same])) same += 1
  const last = pieces.at(same - 1)
  if (same === 0 || !(last instanceof IntegratedPiece)) return integrate(segments, initial, CONTINUED_TOLERANCE)
  if (same === segments.length)
    return { ...earlier, end: last.segment.start + last.segment.duration, pieces: pieces.slice(0, same) }
  const rest = integrate(segments.slice(same), last.stateAt(last.segment.duration), CONTINUED_TOLERANCE)
  return { end: rest.end, initial, pieces: [...pieces.slice(0, same), ...rest.pieces] }
}

function areSame(a: Segment, b: Segment): boolean {
  return (
    a.start === b.start &&
    a.duration === b.duration &&
    a.model === b.model &&
    a.model.compartments.every((_, i) => a.boluses[i] === b.boluses[i] && a.inputs[i] === b.inputs[i])
  )
}
