import { weightFindings } from '../patient/findings'
import { findingsOverTime } from '../patient/overTime'
import { type Question, questionParameters, questionPerson } from '../patient/plausibility'
import { type CourseRequest, courseOf } from '../pk/course'
import { distributionOver } from '../pk/distribution'
import { dosesOverLimits } from '../pk/doseLimits'
import { exposureOf } from '../pk/exposure'
import type { Issue } from '../pk/issue'
import { OperatorStore } from '../pk/operatorStore'
import { type PhasesOfStretch, phasesOf } from '../pk/phases'
import { tooManyRows } from '../pk/profileTimes'
import type { WeightDescriptor } from '../pk/subject'
import { regimenCautions, studyCautions } from './cautions'
import { failedChecks } from './checkedModel'
import { individualsOf } from './individuals'
import type { IndividualStretch, RegimenResult, StudyResult } from './result'
import type { Study } from './study'

export type StudyOutcome =
  | { readonly ok: true; readonly result: StudyResult }
  | { readonly ok: false; readonly issues: readonly Issue[] }

/**
 * Run a study: the individual over every stretch of time, then every regimen in it. Issues where a covariate is missing, a
 * parameter cannot be, a prescription cannot be written out, the table would be too long or the model fails its own checks.
 * `doing` is told, in words, what is being computed.
 */
export function runStudy(study: Study, doing: (what: string) => void = () => undefined): StudyOutcome {
  const individuals = individualsOf(study)
  const tooLong = tooManyRows(study.sampling, study.sampling.until)
  const early = [
    ...failedChecks(study.drugModel, study.modelChecks),
    ...(tooLong === undefined ? [] : [tooLong]),
    ...(individuals.ok ? [] : individuals.issues)
  ]
  if (!individuals.ok || early.length > 0) return { ok: false, issues: early }

  const { stretches } = individuals
  const store = new OperatorStore()
  const issues: Issue[] = []
  const regimens: RegimenResult[] = []
  const cautions: string[] = []
  study.regimens.forEach((regimen, index) => {
    doing(`computing "${regimen.name}"`)
    const request: CourseRequest = {
      prescription: regimen,
      stretches: stretches.map(({ from, individual }) => ({ from, subject: individual.subject })),
      sessions: study.sessions,
      until: study.sampling.until,
      path: `regimens[${index}]`,
      store
    }
    const outcome = courseOf(request)
    if (!outcome.ok) {
      issues.push(...outcome.issues)
      return
    }
    const { course } = outcome
    const infusionRoutes = study.drugModel.routes.filter(({ input }) => input === 'infusion').map(({ name }) => name)
    const overLimits = dosesOverLimits(course, study.drugModel.drug.limits, infusionRoutes)
    const exposure = exposureOf({
      course,
      request,
      targets: study.targets,
      ...(study.now === undefined ? {} : { now: study.now })
    })
    regimens.push({
      name: regimen.name,
      request,
      course,
      exposure,
      distribution: distributionOver(course, study.drugModel.drug.sampleAfter),
      overLimits,
      notes: course.notes
    })
    cautions.push(...regimenCautions({ regimen, course, exposure, overLimits, until: study.sampling.until }))
  })
  if (issues.length > 0) return { ok: false, issues }

  const findings = [
    ...stretches.flatMap(({ individual }) => individual.findings),
    ...findingsOverTime(study.drugModel, study.people, study.sampling.until),
    ...study.people.flatMap(({ person }) => weightFindings(weightWords(study), person, study.drugModel))
  ]
  const questions = questionsOf(study, stretches)
  return {
    ok: true,
    result: {
      study,
      stretches,
      regimens,
      phases: stretchPhases(study, stretches, regimens),
      findings,
      questions,
      cautions: studyCautions(study, findings, [...questions.map(({ text }) => text), ...cautions])
    }
  }
}

/** What is implausible about the patient as typed, and about the parameters that come out. */
function questionsOf(study: Study, stretches: readonly IndividualStretch[]): readonly Question[] {
  const { drugModel, people } = study
  const asked = [
    ...people.flatMap(({ person, typed, path }) =>
      // A value that goes on unchanged was asked about where it was typed.
      questionPerson(person, typed, path).filter((question) => Object.hasOwn(typed, lastKey(question.path)))
    ),
    ...stretches.flatMap(({ person, individual }) => questionParameters(drugModel, person, individual))
  ]
  // A parameter that no change touches is asked about once.
  return [...new Map(asked.map((question) => [question.text, question])).values()]
}

function lastKey(path: string): string {
  return path.slice(path.lastIndexOf('.') + 1)
}

/** The words by which doses name a weight. */
function weightWords(study: Study): readonly WeightDescriptor[] {
  return study.regimens.flatMap(({ lines }) => lines.flatMap(({ by }) => by ?? []))
}

/** The phases of every stretch, or why there are none, with the periods and infusion lengths of all regimens. */
function stretchPhases(
  study: Study,
  stretches: readonly IndividualStretch[],
  regimens: readonly RegimenResult[]
): readonly PhasesOfStretch[] {
  const { until } = study.sampling
  const given = regimens.flatMap(({ course }) => course.administrations)
  const periods = regimens.flatMap(({ exposure }) => exposure.steadyState.period ?? [])
  const infusions = given.map(({ duration }) => duration).filter((duration) => duration > 0)
  return stretches.flatMap(({ from, individual }, i) => {
    const { model } = individual.subject
    if (from >= until) return []
    return phasesOf({
      model,
      from,
      to: Math.min(stretches[i + 1]?.from ?? until, until),
      until,
      periods: distinct(periods),
      infusions: distinct(infusions)
    })
  })
}

function distinct(values: readonly number[]): readonly number[] {
  return [...new Set(values)].sort((a, b) => a - b)
}
