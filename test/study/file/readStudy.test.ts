import { readdirSync, readFileSync } from 'node:fs'
import { describe, expect, test } from 'vitest'
import { readStudy } from '../../../src/study/file/readStudy'
import { type Json, model, put, q, shippedModel, study } from '../example'

const issuesOf = (content: unknown) => {
  const text = typeof content === 'string' || content instanceof Uint8Array ? content : JSON.stringify(content)
  const reading = readStudy(text, shippedModel)
  return reading.ok ? [] : reading.issues
}

/** A study whose model is in place, changed at one place of the model. */
const withModel = (id: string, path: string, value: unknown) => put(study(), 'model', put(model(id), path, value))

const dose = 'regimens[0].doses[1]'
const oral = 'regimens[0].doses[3]'

/** What is done to the valid study, where the problem must be named, and what must be said. */
const refused: readonly (readonly [string, () => unknown, string, RegExp])[] = [
  [
    'an unknown key',
    () => put(study(), `${dose}.amont`, 1),
    `${dose}.amont`,
    /unknown key "amont"; the nearest known key is "amount"/
  ],
  ['an unknown key at the top', () => put(study(), 'regimen', []), 'regimen', /nearest known key is "regimens"/],
  [
    'an unknown key of the patient',
    () => put(study(), 'patient.wieght', q(1, 'kg')),
    'patient.wieght',
    /nearest known key is "weight"/
  ],
  [
    'a missing unit',
    () => put(study(), `${dose}.amount`, 500),
    `${dose}.amount`,
    /^amount needs a unit, for example \{ "value": 500, "unit": "mg" \}$/
  ],
  [
    'a quantity without its unit',
    () => put(study(), `${dose}.amount`, { value: 500 }),
    `${dose}.amount`,
    /^amount needs a unit, for example \{ "value": 500, "unit": "mg" \}$/
  ],
  [
    'a quantity as text',
    () => put(study(), `${dose}.amount`, '500 mg'),
    `${dose}.amount`,
    /must be a value with its unit/
  ],
  [
    'a quantity without its value',
    () => put(study(), `${dose}.amount`, { unit: 'mg' }),
    `${dose}.amount`,
    /needs a value/
  ],
  [
    'an unknown key in a quantity',
    () => put(study(), `${dose}.amount.per`, 'kg'),
    `${dose}.amount`,
    /unknown key "per"/
  ],
  [
    'an unknown unit',
    () => put(study(), `${dose}.amount.unit`, 'mcg'),
    `${dose}.amount`,
    /unknown unit "mcg"; did you mean "ug"\?/
  ],
  ['an unknown unit of time', () => put(study(), `${dose}.every.unit`, 'hr'), `${dose}.every`, /did you mean "h"\?/],
  [
    'an unknown unit like no other',
    () => put(study(), `${dose}.amount.unit`, 'stone'),
    `${dose}.amount`,
    /unknown unit "stone"; use mg, g, ug, ng/
  ],
  [
    'a unit of activity',
    () => put(study(), `${dose}.amount.unit`, '[iU]'),
    `${dose}.amount`,
    /drugs measured in units of activity are not handled/
  ],
  [
    'an amount in a unit of body weight',
    () => put(study(), `${dose}.amount.unit`, 'kg'),
    `${dose}.amount`,
    /"kg" is a unit of body weight, not of dose/
  ],
  [
    'a weight in a unit of amount',
    () => put(study(), 'patient.weight.unit', 'mg'),
    'patient.weight',
    /"mg" is a unit of amount of drug, not of body weight/
  ],
  [
    'a time in a unit of age',
    () => put(study(), 'sampling.until.unit', 'a'),
    'sampling.until',
    /"a" is a unit of age, not of time/
  ],
  [
    'an age in a unit of time',
    () => put(study(), 'patient.age.unit', 'h'),
    'patient.age',
    /"h" is a unit of time, not of age/
  ],
  [
    'a cap per kg',
    () => put(study(), `${dose}.atMost`, q(20, 'mg/kg')),
    `${dose}.atMost`,
    /reckoned on the patient, in doses only/
  ],
  [
    'creatinine by mass and litre',
    () => put(study(), 'patient.serumCreatinine.unit', 'mg/L'),
    'patient.serumCreatinine',
    /use mg\/dL, umol\/L/
  ],
  [
    'an indexed clearance where an absolute one is asked',
    () => put(study(), 'patient.creatinineClearance', q(60, 'mL/min/{1.73_m2}')),
    'patient.creatinineClearance',
    /is indexed to 1.73 m2 of body surface, an absolute rate is asked/
  ],
  [
    'an absolute filtration rate where an indexed one is asked',
    () => put(study(), 'patient.estimatedGfr', q(60, 'mL/min')),
    'patient.estimatedGfr',
    /is an absolute rate, one indexed to 1.73 m2/
  ],
  [
    'a negative amount',
    () => put(study(), `${dose}.amount.value`, -750),
    `${dose}.amount`,
    /must be greater than 0, got -750 mg/
  ],
  ['an amount of zero', () => put(study(), `${dose}.amount.value`, 0), `${dose}.amount`, /must be greater than 0/],
  ['a negative time', () => put(study(), `${dose}.at.value`, -1), `${dose}.at`, /must not be negative, got -1 h/],
  ['a negative weight', () => put(study(), 'patient.weight.value', -58), 'patient.weight', /must be greater than 0/],
  [
    'a number beyond a double',
    () => JSON.stringify(study()).replace('"value":750', '"value":1e999'),
    `${dose}.amount.value`,
    /too large for a number; numbers must be finite/
  ],
  [
    'NaN, which is not JSON',
    () => JSON.stringify(study()).replace('"value":750', '"value":NaN'),
    '',
    /not JSON: line 1, column \d+: expected a value, found "NaN"/
  ],
  [
    'an infusion of no length',
    () => put(study(), `${dose}.over.value`, 0),
    `${dose}.over`,
    /must be greater than 0, got 0 h/
  ],
  ['a zero spacing', () => put(study(), `${dose}.every.value`, 0), `${dose}.every`, /must be greater than 0/],
  [
    'an unknown route',
    () => put(study(), `${dose}.route`, 'intravenos'),
    `${dose}.route`,
    /no route "intravenos"; the nearest is "intravenous", of "intravenous", "oral"/
  ],
  ['an unknown model', () => put(study(), 'model', 'pw-999'), 'model', /no shipped model is called "pw-999"/],
  ['no model', () => put(study(), 'model', undefined), 'model', /model is missing/],
  ['a model that is a number', () => put(study(), 'model', 7), 'model', /must be the id of a shipped model/],
  ['a missing route', () => put(study(), `${dose}.route`, undefined), `${dose}.route`, /route is missing/],
  ['a missing time of a dose', () => put(study(), `${dose}.at`, undefined), `${dose}.at`, /at is missing; for example/],
  ['neither amount nor rate', () => put(study(), `${oral}.amount`, undefined), oral, /needs either "amount" or "rate"/],
  [
    'both amount and rate',
    () => put(study(), `${dose}.rate`, q(5, 'mg/h')),
    dose,
    /either "amount" or "rate", not both/
  ],
  [
    'a rate without a length',
    () => put(study(), 'regimens[0].doses[2].over', undefined),
    'regimens[0].doses[2].over',
    /"rate" needs "over"/
  ],
  [
    'an infusion route without a length',
    () => put(study(), `${dose}.over`, undefined),
    `${dose}.over`,
    /are infusions: give "over", or say "bolus": true/
  ],
  ['a bolus with a length', () => put(study(), `${dose}.bolus`, true), `${dose}.bolus`, /a bolus has no length/],
  [
    'a weight word on a dose that is not per kg',
    () => put(study(), `${dose}.by`, 'ideal'),
    `${dose}.by`,
    /this dose is none/
  ],
  [
    'an unknown weight word',
    () => put(study(), 'regimens[0].doses[0].by', 'idael'),
    'regimens[0].doses[0].by',
    /nearest is "ideal"/
  ],
  ['a count without a spacing', () => put(study(), `${oral}.count`, 3), `${oral}.count`, /"count" needs "every"/],
  ['a count of none', () => put(study(), `${dose}.count`, 0), `${dose}.count`, /at least 1/],
  ['a count that is no whole number', () => put(study(), `${dose}.count`, 1.5), `${dose}.count`, /whole number/],
  [
    'an exception beyond the doses',
    () => put(study(), `${dose}.exceptions[0].number`, 7),
    `${dose}.exceptions[0].number`,
    /there is no dose 7: the line has 6 doses/
  ],
  [
    'an exception to a single dose',
    () => put(study(), `${oral}.exceptions`, [{ number: 2, missed: true }]),
    `${oral}.exceptions[0].number`,
    /the line has one dose/
  ],
  [
    'two exceptions to one dose',
    () => put(study(), `${dose}.exceptions[1].number`, 2),
    `${dose}.exceptions[1].number`,
    /has an exception already/
  ],
  [
    'a missed dose that was late',
    () => put(study(), `${dose}.exceptions[0].lateBy`, q(1, 'h')),
    `${dose}.exceptions[0].lateBy`,
    /a missed dose has no other departure/
  ],
  [
    'an exception that says nothing',
    () => put(study(), `${dose}.exceptions[0].missed`, undefined),
    `${dose}.exceptions[0]`,
    /say what happened to this dose/
  ],
  [
    'shifting later without being late',
    () => put(study(), `${dose}.exceptions[2].shiftsLater`, true),
    `${dose}.exceptions[2].shiftsLater`,
    /needs "lateBy"/
  ],
  [
    'a dose brought to before 0',
    () => put(study(), `${oral}.exceptions`, [{ number: 1, lateBy: q(-161, 'h') }]),
    `${oral}.exceptions[0].lateBy`,
    /no time is before 0 h/
  ],
  [
    'an infusion stopped after its end',
    () => put(study(), `${dose}.exceptions[2].stoppedAfter`, q(61, 'min')),
    `${dose}.exceptions[2].stoppedAfter`,
    /the infusion lasts 1 h/
  ],
  [
    'a bolus that was stopped',
    () => put(study(), `${oral}.exceptions`, [{ number: 1, stoppedAfter: q(1, 'min') }]),
    `${oral}.exceptions[0].stoppedAfter`,
    /only an infusion can be stopped/
  ],
  [
    'more taken than there was',
    () => put(study(), `${oral}.exceptions`, [{ number: 1, fractionTaken: 2 }]),
    `${oral}.exceptions[0].fractionTaken`,
    /must be at most 1, got 2/
  ],
  [
    'a regimen name twice',
    () => put(study(), 'regimens[1]', (study().regimens as Json[])[0]),
    'regimens[1].name',
    /there is another regimen/
  ],
  ['no regimen', () => put(study(), 'regimens', []), 'regimens', /needs at least 1/],
  ['no dose', () => put(study(), 'regimens[0].doses', []), 'regimens[0].doses', /needs at least 1/],
  [
    'a steady state of nothing that repeats',
    () => put(put(study(), 'regimens[0].start', 'steady-state'), `${dose}.at`, q(48, 'h')),
    'regimens[0].start',
    /needs a dose with "every"/
  ],
  [
    'a window without its high limit',
    () => put(study(), 'targets[0].high', undefined),
    'targets[0]',
    /needs "low" and "high"/
  ],
  ['a trough without limits', () => put(study(), 'targets[2].high', undefined), 'targets[2]', /needs "low" or "high"/],
  ['a level without its time', () => put(study(), 'targets[3].after', undefined), 'targets[3].after', /needs "after"/],
  [
    'a level without its start',
    () => put(study(), 'targets[3].from', undefined),
    'targets[3].from',
    /"dose start" or "dose end"/
  ],
  [
    'a time above nothing',
    () => put(study(), 'targets[4].timesMic', undefined),
    'targets[4]',
    /needs either "low" or "timesMic"/
  ],
  [
    'a time above without a share',
    () => put(study(), 'targets[4].share', undefined),
    'targets[4].share',
    /needs "share"/
  ],
  ['a share above 1', () => put(study(), 'targets[0].share', 90), 'targets[0].share', /at most 1, got 90/],
  [
    'limits the wrong way round',
    () => put(study(), 'targets[0].low.value', 60),
    'targets[0].high',
    /must be above the low one/
  ],
  [
    'an area in a unit of concentration',
    () => put(study(), 'targets[1].low.unit', 'mg/L'),
    'targets[1].low',
    /not of area under a concentration curve/
  ],
  [
    'a concentration in a unit of area',
    () => put(study(), 'targets[0].low.unit', 'mg.h/L'),
    'targets[0].low',
    /not of drug concentration/
  ],
  ['an unknown kind of target', () => put(study(), 'targets[1].kind', 'auc'), 'targets[1].kind', /nearest is "auc24"/],
  [
    'an unknown stretch',
    () => put(study(), 'targets[1].when', 'day-0'),
    'targets[1].when',
    /must be one of "steady-state"/
  ],
  [
    'multiples of a MIC that is not there',
    () => put(study(), 'mic', undefined),
    'targets[4].timesMic',
    /needs the study's "mic"/
  ],
  [
    'limits per MIC that is not there',
    () =>
      put(
        put(put(put(study(), 'mic', undefined), 'targets[1].perMic', true), 'targets[1].low.unit', 'h'),
        'targets[1].high.unit',
        'h'
      ),
    'targets[1].perMic',
    /needs the study's "mic"/
  ],
  ['an area per MIC in milligrams', () => put(study(), 'targets[1].perMic', true), 'targets[1].low', /use h$/],
  [
    'multiples of the MIC for a trough',
    () => put(study(), 'targets[2].timesMic', 1),
    'targets[2].timesMic',
    /use "perMic": true/
  ],
  [
    'unbound without a free fraction',
    () => withModel('pw-101', 'drug.fractionUnbound', undefined),
    'targets[4].unbound',
    /states no drug.fractionUnbound/
  ],
  [
    'a signal that is not there',
    () => put(study(), 'targets[0].of', 'brain'),
    'targets[0].of',
    /no observation or effect site/
  ],
  [
    'from now without a now',
    () => put(put(study(), 'now', undefined), 'targets[0].when', 'from-now'),
    'targets[0].when',
    /needs the study's "now"/
  ],
  ['a now after the end', () => put(study(), 'now', q(8, 'd')), 'now', /after sampling.until/],
  [
    'a sample after the end',
    () => put(study(), 'sampling.also[0]', q(169, 'h')),
    'sampling.also[0]',
    /after sampling.until/
  ],
  [
    'a grid of too many rows',
    () => put(study(), 'sampling.every', q(0.1, 's')),
    'sampling.every',
    /6048002 sampling times; at most 5000000/
  ],
  ['a time of day that is none', () => put(study(), 'clock', '25:00'), 'clock', /time of day/],
  ['an unknown unit to display', () => put(study(), 'display.time', 'hr'), 'display.time', /did you mean "h"\?/],
  [
    'unbound display without a free fraction',
    () => put(withModel('pw-101', 'drug.fractionUnbound', undefined), 'display.unbound', true),
    'display.unbound',
    /free fraction/
  ],
  [
    'moles without a molar mass',
    () => put(withModel('pw-101', 'drug.molarMass', undefined), `${dose}.amount`, q(1, 'mmol')),
    `${dose}.amount`,
    /the model states no molar mass/
  ],
  [
    'a change to the input of a covariate given directly',
    () => put(study(), 'patient.creatinineClearance', q(30, 'mL/min')),
    'patient.changes[0].serumCreatinine',
    /serumCreatinine changes, but creatinineClearance, which depends on it, was given directly/
  ],
  [
    'a change of sex',
    () => put(study(), 'patient.changes[0].sex', 'male'),
    'patient.changes[0].sex',
    /unknown key "sex"/
  ],
  [
    'a change of nothing',
    () => put(study(), 'patient.changes[0].serumCreatinine', undefined),
    'patient.changes[0]',
    /names at least one value/
  ],
  [
    'two changes at one time',
    () => put(study(), 'patient.changes[1]', { at: q(3, 'd'), weight: q(60, 'kg') }),
    'patient.changes[1].at',
    /another change at this time/
  ],
  [
    'sessions without renal replacement',
    () => put(study(), 'patient.sessions', [{ at: q(4, 'h'), for: q(4, 'h'), clearance: q(100, 'mL/min') }]),
    'patient.sessions',
    /"renalReplacement" must be "intermittent" or "continuous", and creatinineClearance/
  ],
  [
    'a count of sessions without a spacing',
    () => put(study(), 'patient.sessions', [{ at: q(4, 'h'), for: q(4, 'h'), clearance: q(100, 'mL/min'), count: 3 }]),
    'patient.sessions[0].count',
    /"count" needs "every"/
  ],
  [
    'a session of no length',
    () => put(study(), 'patient.sessions', [{ at: q(4, 'h'), for: q(0, 'h'), clearance: q(100, 'mL/min') }]),
    'patient.sessions[0].for',
    /must be greater than 0/
  ],
  [
    'a level of an unknown regimen',
    () => put(study(), 'levels[0].regimen', '750 mg'),
    'levels[0].regimen',
    /no regimen is called "750 mg"; there is only "750 mg every 24 h"/
  ],
  ['a plan on an unknown route', () => put(study(), 'plan.routes[0]', 'rectal'), 'plan.routes[0]', /no route "rectal"/],
  ['a cohort of nobody', () => put(study(), 'cohort.size', 0), 'cohort.size', /at least 1/],
  [
    'shares of people that are no shares',
    () => put(study(), 'cohort.people', { kind: 'drawn', covariates: { sex: { female: 2 } } }),
    'cohort.people.covariates.sex.female',
    /at most 1, got 2/
  ],
  [
    'a distribution without its median',
    () => put(study(), 'cohort.people', { kind: 'drawn', covariates: { weight: { kind: 'log-normal', sd: 0.2 } } }),
    'cohort.people.covariates.weight.median',
    /median is missing/
  ],
  ['another format', () => put(study(), 'format', 'phasewise-model'), 'format', /must be "phasewise-study"/],
  ['another version', () => put(study(), 'version', 2), 'version', /must be 1, got 2/],
  [
    'a name with a line break',
    () => put(study(), 'regimens[0].name', 'a\nb'),
    'regimens[0].name',
    /control characters/
  ],
  ['a shipped model that is broken', () => study(), 'model', /is not valid: transfers\[0\].rate/],
  ['a list', () => [], '', /a study is an object in braces/]
]

describe('a study file is refused, with the place and what would be right, for', () => {
  test.each(refused)('%s', (title, make, path, message) => {
    const shipped =
      title === 'a shipped model that is broken' ? () => put(model('pw-101'), 'transfers[0].rate', 'kb') : shippedModel
    const content = make()
    const reading = readStudy(typeof content === 'string' ? content : JSON.stringify(content), shipped)
    if (reading.ok) return expect.fail('the study was accepted')
    const there = reading.issues.filter((issue) => issue.path === path)
    expect(there.map((issue) => issue.message).join('\n'), JSON.stringify(reading.issues, null, 1)).toMatch(message)
    // One cause, one problem; a second only where the study no longer holds together without the first.
    expect(reading.issues.length).toBeLessThanOrEqual(2)
  })

  test('a duplicate key, though both values would do', () => {
    const text = JSON.stringify(study()).replace('"clock":', '"clock":"10:00","clock":')
    expect(issuesOf(text)).toEqual([{ path: 'clock', message: 'duplicate key "clock"; keep one of them' }])
  })

  test('a file over 20 MB, before anything in it is read', () => {
    const bytes = new Uint8Array(20_000_001).fill(0x20)
    expect(issuesOf(bytes)).toEqual([{ path: '', message: 'the file is larger than 20 MB (20.0 MB)' }])
  })

  test('bytes that are not UTF-8', () => {
    const bytes = new TextEncoder().encode(JSON.stringify(study()))
    bytes[bytes.indexOf(0x50)] = 0xff
    expect(issuesOf(bytes)).toEqual([{ path: '', message: 'the file is not UTF-8 text; save it as UTF-8' }])
    // UTF-16 with its byte order mark.
    expect(issuesOf(new Uint8Array([0xff, 0xfe, 0x7b, 0x00]))).toHaveLength(1)
  })

  test('text that is not JSON, with line and column', () => {
    expect(issuesOf('{\n  "format": "phasewise-study",\n  "version": 1,,\n}')).toEqual([
      { path: '', message: 'not JSON: line 3, column 16: expected a key in double quotes, found ","' }
    ])
  })
})

describe('all problems are listed at once', () => {
  test('of the shape, of units, of names and of rules, in different parts and in one dose', () => {
    const broken = study()
    put(broken, 'zzz', 1)
    put(broken, `${dose}.amount`, q(-1, 'mcg'))
    put(broken, `${dose}.route`, 'orl')
    put(broken, `${oral}.count`, 2)
    put(broken, 'targets[0].high', undefined)
    put(broken, 'patient.weight', 58)
    put(broken, 'display.amount', 'kg')
    expect(
      issuesOf(broken)
        .map(({ path }) => path)
        .sort()
    ).toEqual(
      [
        'display.amount',
        'patient.weight',
        `${dose}.amount`,
        `${dose}.route`,
        `${oral}.count`,
        'targets[0]',
        'zzz'
      ].sort()
    )
  })

  test('of the study and of a model in place', () => {
    const broken = put(withModel('pw-101', 'transfers[0].rate', 'kb'), 'sampling.until', 168)
    expect(issuesOf(broken).map(({ path }) => path)).toEqual(['model.transfers[0].rate', 'sampling.until'])
  })

  test('of a study whose model is unknown, as far as they do not hang on it', () => {
    const broken = put(put(study(), 'model', 'pw-999'), `${dose}.amount.unit`, 'mcg')
    expect(issuesOf(broken).map(({ path }) => path)).toEqual(['model', `${dose}.amount`])
  })

  test('of a study whose model has a route of the wrong shape, without blaming the doses for it', () => {
    expect(issuesOf(withModel('pw-101', 'routes[0].name', 7)).map(({ path }) => path)).toEqual(['model.routes[0].name'])
    const unread = put(withModel('pw-101', 'drug.molarMass.unit', 'u'), 'mic', q(2, 'umol/L'))
    expect(issuesOf(unread).map(({ path }) => path)).toEqual(['model.drug.molarMass'])
  })

  test('each on one line, however the file is written', () => {
    const issues = issuesOf(put(study(), 'a\nb\u2028c', 'x'))
    expect(issues).toHaveLength(1)
    expect(`${issues[0]?.path}${issues[0]?.message}`).not.toMatch(/[\n\u2028]/)
  })
})

describe('products', () => {
  const withProducts = () => {
    const content = withModel('pw-101', 'drug.products', [{ name: 'sodium salt', fraction: 0.92 }])
    for (let i = 0; i < 4; i++) put(content, `regimens[0].doses[${i}].product`, 'sodium salt')
    return content
  }

  test('are named where there are any', () => {
    expect(issuesOf(withProducts())).toEqual([])
    expect(issuesOf(put(withProducts(), `${dose}.product`, undefined))).toEqual([
      { path: `${dose}.product`, message: 'say which product of the drug is dosed: "sodium salt"' }
    ])
  })

  test('are known to the model', () => {
    const [issue] = issuesOf(put(withProducts(), `${dose}.product`, 'sodium'))
    expect(issue).toEqual({
      path: `${dose}.product`,
      message: 'the model\'s drug has no product "sodium"; there is only "sodium salt"'
    })
    expect(issuesOf(put(study(), `${dose}.product`, 'sodium'))[0]?.path).toBe(`${dose}.product`)
  })

  test('are dosed by mass, since only the molar mass of the moiety is known', () => {
    expect(issuesOf(put(withProducts(), `${dose}.amount`, q(1, 'mmol')))[0]?.path).toBe(`${dose}.amount`)
  })
})

describe("the model's own covariates", () => {
  const withOwn = (path: string, value: unknown) => {
    const content = put(put(study(), 'model', 'pw-107'), 'patient.metaboliser', 'slow')
    return put(put(content, 'patient.alphaGlycoprotein', q(80, 'mg/dL')), path, value)
  }

  test('are taken in any unit of the same kind', () => {
    expect(issuesOf(withOwn('patient.alphaGlycoprotein', q(0.8, 'g/L')))).toEqual([])
    expect(issuesOf(withOwn('patient.changes[0].alphaGlycoprotein', q(0.9, 'g/L')))).toEqual([])
  })

  test.each([
    ['patient.alphaGlycoprotein', 0.8, /alphaGlycoprotein needs a unit, for example { "value": 0.8, "unit": "g\/L" }/],
    ['patient.alphaGlycoprotein', q(20, 'umol/L'), /"umol\/L" does not convert to "g\/L"/],
    ['patient.metaboliser', 'slwo', /metaboliser must be one of its categories; the nearest is "slow"/],
    ['patient.metaboliser', 1, /metaboliser must be one of its categories/],
    ['patient.alphaGlycoprotien', q(1, 'g/L'), /the nearest known key is "alphaGlycoprotein"/]
  ])('are checked against the model: %s', (path, value, message) => {
    const issues = issuesOf(withOwn(path, value))
    expect(issues.map((issue) => issue.path)).toEqual([path])
    expect(issues[0]?.message).toMatch(message)
  })
})

describe('a study file is accepted', () => {
  test('where it uses every block of the format', () => {
    expect(issuesOf(study())).toEqual([])
  })

  test.each(readdirSync('models/studies'))('as shipped: %s', (file) => {
    expect(issuesOf(new Uint8Array(readFileSync(`models/studies/${file}`)))).toEqual([])
  })

  test('with a byte order mark, as some editors write it', () => {
    expect(issuesOf(new TextEncoder().encode(`\ufeff${JSON.stringify(study())}`))).toEqual([])
  })
})
