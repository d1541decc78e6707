import { Draw } from './draw'
import { type Json, model, q } from './example'

/** The models that random studies are about: between them every linear transfer, factor, product and kind of route. */
const MODELS = ['pw-101', 'pw-102', 'pw-103', 'pw-104', 'pw-105', 'pw-106', 'pw-107', 'pw-108'] as const

/**
 * A random study that is valid, with a patient whom its model is valid for: it reads and it runs. The same seed gives the
 * same study. Read it with `shippedModel` of `example.ts`.
 */
export function randomStudy(seed: number): Json {
  const draw = new Draw(seed)
  const id = draw.of(MODELS)
  const subject: Subject = { draw, model: model(id), until: draw.of([24, 48, 96, 168, 240]) }
  const patient = randomPatient(id, subject)
  const regimens = Array.from({ length: draw.whole(1, 3) }, (_, i) => randomRegimen(`regimen ${i + 1}`, subject))
  const step = draw.of([q(0.25, 'h'), q(30, 'min'), q(1, 'h'), q(90, 'min'), q(0.1, 'd'), q(2, 'h')])
  return {
    format: 'phasewise-study',
    version: 1,
    ...(draw.chance(0.5) && { title: `random study ${seed}` }),
    model: draw.chance(0.3) ? subject.model : id,
    patient,
    regimens,
    targets: Array.from({ length: draw.whole(0, 4) }, () => randomTarget(subject)),
    mic: q(draw.typedLog(0.1, 8), 'mg/L'),
    now: q(draw.typed(0, subject.until), 'h'),
    sampling: {
      until: draw.chance(0.5) ? q(subject.until, 'h') : q(subject.until / 24, 'd'),
      every: step,
      ...(draw.chance(0.4) && { also: [q(draw.typed(0, 600), 'min'), q(draw.typed(0, 20), 'h')] })
    },
    ...(draw.chance(0.5) && { clock: '07:30' }),
    ...(draw.chance(0.5) && {
      display: { time: draw.of(['h', 'd', 'min']), concentration: draw.of(['mg/L', 'ng/mL']) }
    }),
    ...(draw.chance(0.3) && { acceptAssumed: draw.chance(0.5) }),
    ...(draw.chance(0.3) && { cohort: { size: draw.whole(1, 5000), seed: draw.whole(0, 1e6) } }),
    ...(draw.chance(0.3) && {
      levels: [{ at: q(draw.typed(0, 24), 'h'), value: q(draw.typed(0, 40), 'mg/L'), regimen: 'regimen 1' }]
    })
  }
}

interface Subject {
  readonly draw: Draw
  readonly model: Json
  readonly until: number
}

function randomPatient(id: (typeof MODELS)[number], subject: Subject): Json {
  const { draw } = subject
  if (id === 'pw-103') return randomInfant(subject)
  const patient: Json = {
    sex: draw.of(['female', 'male']),
    age: q(draw.whole(18, 80), 'a'),
    weight: draw.chance(0.8) ? q(draw.typed(48, 108), 'kg') : q(draw.whole(48_000, 108_000), 'g'),
    height: draw.chance(0.8) ? q(draw.whole(150, 195), 'cm') : q(draw.typed(1.5, 1.95), 'm'),
    serumCreatinine: draw.chance(0.7) ? q(draw.typed(0.6, 2.5), 'mg/dL') : q(draw.whole(55, 220), 'umol/L'),
    albumin: draw.chance(0.7) ? q(draw.typed(25, 48), 'g/L') : q(draw.typed(2.5, 4.8), 'g/dL')
  }
  if (id === 'pw-105') patient.meal = draw.of(['fasted', 'fed'])
  if (id === 'pw-107') {
    patient.metaboliser = draw.of(['slow', 'intermediate', 'rapid'])
    patient.alphaGlycoprotein = draw.chance(0.7) ? q(draw.typed(0.4, 2.1), 'g/L') : q(draw.typed(40, 210), 'mg/dL')
  }
  if (draw.chance(0.2)) patient.dosingWeight = q(draw.typed(50, 80), 'kg')
  if (draw.chance(0.2)) return onDialysis(id, patient, subject)
  const changes = draw.whole(0, 2)
  if (changes > 0) {
    patient.changes = Array.from({ length: changes }, (_, i) => ({
      at: q(draw.whole(1, 20) + 24 * i, 'h'),
      ...(draw.chance(0.6)
        ? { serumCreatinine: q(draw.typed(0.6, 2.5), 'mg/dL') }
        : { weight: q(draw.typed(48, 108), 'kg') })
    }))
  }
  return patient
}

function randomInfant({ draw }: Subject): Json {
  const gestational = draw.whole(25, 40)
  const postnatal = draw.whole(0, 150)
  return {
    sex: draw.of(['female', 'male']),
    gestationalAge: q(gestational, 'wk'),
    postnatalAge: q(postnatal, 'd'),
    ...(draw.chance(0.3) && { postmenstrualAge: q(gestational + Math.round(postnatal / 7), 'wk') }),
    weight: draw.chance(0.5) ? q(draw.typed(0.6, 8), 'kg') : q(draw.whole(600, 8000), 'g'),
    height: q(draw.whole(30, 70), 'cm')
  }
}

function onDialysis(id: (typeof MODELS)[number], patient: Json, { draw }: Subject): Json {
  const usesGfr = id === 'pw-108'
  return {
    ...patient,
    renalReplacement: draw.of(['intermittent', 'continuous']),
    ...(usesGfr
      ? { estimatedGfr: q(draw.typed(3, 15), 'mL/min/{1.73_m2}') }
      : { creatinineClearance: q(draw.typed(3, 15), 'mL/min') }),
    sessions: [
      {
        at: q(draw.typed(0, 30), 'h'),
        for: draw.chance(0.5) ? q(draw.typed(2, 6), 'h') : q(240, 'min'),
        clearance: q(draw.typed(50, 180), 'mL/min'),
        ...(draw.chance(0.6) && { every: q(48, 'h'), ...(draw.chance(0.5) && { count: draw.whole(1, 4) }) })
      }
    ]
  }
}

function randomRegimen(name: string, subject: Subject): Json {
  const { draw } = subject
  const doses = Array.from({ length: draw.whole(1, 3) }, () => randomDose(subject))
  const repeats = doses.some((dose) => dose.every !== undefined && hours(dose.at) < hours(dose.every))
  return { name, ...(draw.chance(0.5) && { start: repeats && draw.chance(0.4) ? 'steady-state' : 'empty' }), doses }
}

type Typed = { value: number; unit: string }
type Route = { name: string; input?: string; parts?: { over?: string }[] }

function hours(time: unknown): number {
  const { value, unit } = time as Typed
  return unit === 'h' ? value : unit === 'd' ? value * 24 : value / 60
}

function randomDose(subject: Subject): Json {
  const { draw, until } = subject
  const drug = subject.model.drug as { products?: { name: string }[]; molarMass?: unknown }
  const route = draw.of(subject.model.routes as Route[])
  const releases = route.parts?.some((part) => part.over !== undefined) === true
  const infused = route.input === 'infusion'
  const dose: Json = { route: route.name, at: draw.chance(0.6) ? q(0, 'h') : q(draw.typed(0, until / 2), 'h') }
  if (drug.products !== undefined) dose.product = draw.of(drug.products).name
  if (infused && draw.chance(0.2)) {
    dose.rate = draw.of([
      q(draw.typed(1, 100), 'mg/h'),
      q(draw.typed(1, 20), 'ug/kg/min'),
      q(draw.typed(0.1, 2), 'mg/kg/h')
    ])
    dose.over = q(draw.whole(10, 300), 'min')
  } else {
    dose.amount = randomAmount(subject, drug)
    if (infused && draw.chance(0.8)) dose.over = draw.of([q(30, 'min'), q(1, 'h'), q(draw.typed(0.1, 6), 'h')])
    else if (infused) dose.bolus = true
    else if (!releases && draw.chance(0.1)) dose.over = q(10, 'min')
  }
  const unit = ((dose.amount ?? dose.rate) as Typed).unit
  if (unit.includes('/kg') && draw.chance(0.3)) dose.by = draw.of(['actual', 'ideal', 'adjusted', 'lean'])
  if (unit.includes('/kg') && isInfant(subject)) delete dose.by
  if (draw.chance(0.2)) dose.atMost = q(draw.typed(0.5, 3), 'g')
  if (draw.chance(0.6)) addRepeats(dose, subject)
  if (draw.chance(0.1)) dose.reason = 'as the protocol says'
  return dose
}

function isInfant({ model: { id } }: Subject): boolean {
  return id === 'pw-103'
}

function randomAmount({ draw }: Subject, drug: { products?: unknown; molarMass?: unknown }): Typed {
  const amounts = [
    q(draw.typedLog(5, 1000), 'mg'),
    q(draw.typed(0.1, 2), 'g'),
    q(draw.typed(1, 25), 'mg/kg'),
    q(draw.typed(500, 5000), 'ug/kg'),
    q(draw.typed(50, 500), 'mg/m2')
  ]
  if (drug.molarMass !== undefined && drug.products === undefined) amounts.push(q(draw.typed(0.1, 3), 'mmol'))
  return draw.of(amounts)
}

function addRepeats(dose: Json, { draw }: Subject): void {
  dose.every = draw.of([q(6, 'h'), q(8, 'h'), q(12, 'h'), q(24, 'h'), q(1, 'd'), q(480, 'min')])
  const count = draw.whole(2, 6)
  if (draw.chance(0.5)) dose.count = count
  if (dose.count === undefined || draw.chance(0.5)) return
  const infused = dose.over !== undefined
  const departures: Json[] = [
    { missed: true },
    { lateBy: q(draw.typed(5, 120), 'min') },
    { lateBy: q(draw.typed(0.5, 4), 'h'), shiftsLater: true },
    { fractionTaken: draw.typed(0.1, 1) },
    ...(dose.amount === undefined ? [] : [{ amount: dose.amount as Json }]),
    ...(infused ? [{ stoppedAfter: q(1, 'min') }, { over: q(45, 'min') }] : [])
  ]
  dose.exceptions = [{ number: draw.whole(2, count), ...draw.of(departures) }]
}

function randomTarget({ draw, model: content }: Subject): Json {
  const drug = content.drug as { fractionUnbound?: number }
  const low = draw.typedLog(0.5, 20)
  const high = low * draw.whole(2, 8)
  const when = draw.of([
    'steady-state',
    'throughout',
    'from-now',
    'every-interval',
    'every-day',
    'last-interval',
    'day-2'
  ])
  const common: Json = { when, ...(draw.chance(0.5) && { role: draw.of(['efficacy', 'safety']) }) }
  if (drug.fractionUnbound !== undefined && draw.chance(0.3)) common.unbound = true
  if (content.id === 'pw-102' && draw.chance(0.5)) common.of = 'brain'
  const limits = draw.of([
    { low: q(low, 'mg/L') },
    { high: q(high * 1000, 'ug/L') },
    { low: q(low, 'mg/L'), high: q(high, 'mg/L') }
  ])
  const area = { low: q(low * 10, 'mg.h/L'), high: q(high * 10_000, 'h.ng/mL') }
  return draw.of<Json>([
    { kind: 'window', ...common, share: draw.typed(0.5, 1), low: q(low, 'mg/L'), high: q(high, 'mg/L') },
    { kind: draw.of(['trough', 'peak', 'minimum', 'average']), ...common, ...limits },
    { kind: 'level', ...common, after: q(draw.typed(0, 6), 'h'), from: draw.of(['dose start', 'dose end']), ...limits },
    { kind: draw.of(['auc24', 'auc-interval']), ...common, ...area },
    { kind: draw.of(['auc24', 'auc-interval']), ...common, perMic: true, low: q(draw.typed(50, 400), 'h') },
    { kind: draw.of(['time-above', 'time-below']), ...common, timesMic: draw.typed(1, 5), share: draw.typed(0.1, 1) }
  ])
}
