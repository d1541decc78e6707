import type { Target } from '../pk/target'
import type { Study } from './study'

/** What must be said of targets before their results are used. */
export function targetCautions(study: Study): readonly string[] {
  const { fractionUnbound } = study.drugModel.drug
  const cautions: string[] = []
  study.targets.forEach((target, i) => {
    const named = `target ${i} (${target.kind})`
    if (!isShareOfTime(target) && target.share !== 1) {
      cautions.push(
        `${named}: a share of ${target.share} was given, which only shares of time have: it changes nothing`
      )
    }
    if (target.unbound === true && target.signal.kind !== 'observed') {
      const what = target.signal.kind === 'effect-site' ? 'an effect site' : 'an observation'
      cautions.push(
        `${named}: the free fraction in ${study.drugModel.drug.matrix}, ${fractionUnbound}, is applied to ${what}, where it may differ`
      )
    }
  })
  return cautions
}

function isShareOfTime({ kind }: Target): boolean {
  return kind === 'window' || kind === 'time-above' || kind === 'time-below'
}
