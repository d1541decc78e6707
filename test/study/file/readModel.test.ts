import { readdirSync, readFileSync } from 'node:fs'
import { describe, expect, test } from 'vitest'
import { readModel } from '../../../src/study/file/readModel'
import { type Json, model, put, q } from '../example'

const issuesOf = (content: unknown) => {
  const reading = readModel(JSON.stringify(content))
  return reading.ok ? [] : reading.issues
}

const CL = 'parameters.CL'
const factor = `${CL}.typical[1].factors[0]`
const check = 'checks[0]'
const change = (path: string, value: unknown) => () => put(model('pw-101'), path, value)

const saturable = { kind: 'saturable', from: 'central', maximumRate: 'Vmax', halfSaturation: 'Km' }
const withVmax = () =>
  put(
    put(put(model('pw-101'), 'parameters.Vmax', { unit: 'mg/h', typical: [{ value: 10 }] }), 'parameters.Km', {
      unit: 'mg/L',
      typical: [{ value: 5 }]
    }),
    'transfers[3]',
    { ...saturable }
  )

const binding = () => {
  const content = put(model('pw-101'), 'compartments[3]', { id: 'receptor' })
  put(content, 'compartments[4]', { id: 'complex' })
  put(content, 'parameters.kon', { unit: 'L/nmol/h', typical: [{ value: 0.3 }] })
  put(content, 'parameters.koff', { unit: '/h', typical: [{ value: 0.1 }] })
  put(content, 'parameters.kin', { unit: 'nmol/h', typical: [{ value: 2 }] })
  put(content, 'transfers[3]', {
    kind: 'binding',
    drug: 'central',
    target: 'receptor',
    complex: 'complex',
    association: 'kon',
    dissociation: 'koff'
  })
  put(content, 'parameters.kdeg', { unit: '/h', typical: [{ value: 0.05 }] })
  put(content, 'transfers[4]', { kind: 'production', into: 'receptor', rate: 'kin' })
  return put(content, 'transfers[5]', { kind: 'elimination', from: 'receptor', rate: 'kdeg' })
}

const effect = (path: string, value: unknown) => () => put(model('pw-102'), path, value)

const refused: readonly (readonly [string, () => Json, string, RegExp])[] = [
  ['an unknown key', change('tranfers', []), 'tranfers', /nearest known key is "transfers"/],
  [
    'an unknown kind of transfer',
    change('transfers[0].kind', 'first order'),
    'transfers[0].kind',
    /nearest is "first-order"/
  ],
  ['an unknown key in a transfer', change('transfers[0].speed', 'ka'), 'transfers[0].speed', /unknown key "speed"/],
  [
    'a transfer to nowhere',
    change('transfers[0].to', undefined),
    'transfers[0].to',
    /to is missing.*leaves the body use a transfer of kind "elimination"/
  ],
  [
    'a maximum rate of zero',
    () => put(withVmax(), 'parameters.Vmax.typical[0].value', 0),
    'parameters.Vmax.typical',
    /the maximum rate "Vmax" must be greater than 0, got 0 mg\/h/
  ],
  [
    'a negative maximum rate, summed over its terms',
    () => put(withVmax(), 'parameters.Vmax.typical', [{ value: 3 }, { value: -5 }]),
    'parameters.Vmax.typical',
    /must be greater than 0, got -2 mg\/h/
  ],
  [
    'a negative half-saturation',
    () => put(withVmax(), 'parameters.Km.typical[0].value', -5),
    'parameters.Km.typical',
    /the half-saturation "Km" must be greater than 0, got -5 mg\/L/
  ],
  [
    'a maximum rate in a unit of clearance',
    () => put(withVmax(), 'parameters.Vmax.unit', 'L/h'),
    'parameters.Vmax.unit',
    /"L\/h" is a unit of .*, not of amount per time; use mg\/h/
  ],
  [
    'a half-saturation in a unit of amount',
    () => put(withVmax(), 'parameters.Km.unit', 'mg'),
    'parameters.Km.unit',
    /"mg" is a unit of amount of drug, not of drug concentration/
  ],
  [
    'a maximum rate in moles without the molar mass',
    () => put(put(withVmax(), 'parameters.Vmax.unit', 'umol/h'), 'drug.molarMass', undefined),
    'parameters.Vmax.unit',
    /"umol\/h" counts moles and the model states no molar mass; give drug.molarMass/
  ],
  [
    'a half-saturation in moles without the molar mass',
    () => put(put(withVmax(), 'parameters.Km.unit', 'nmol/L'), 'drug.molarMass', undefined),
    'parameters.Km.unit',
    /"nmol\/L" counts moles and the model states no molar mass/
  ],
  [
    'a Hill exponent of zero',
    () => put(withVmax(), 'transfers[3].hill', 0),
    'transfers[3].hill',
    /must be greater than 0, got 0/
  ],
  [
    'a Hill exponent of zero by its parameter',
    () => put(put(withVmax(), 'transfers[3].hill', 'h'), 'parameters.h', { unit: '1', typical: [{ value: 0 }] }),
    'parameters.h.typical',
    /the Hill exponent "h" must be greater than 0/
  ],
  [
    'a saturable transfer from a compartment without a volume',
    () => put(withVmax(), 'transfers[3].from', 'depot'),
    'transfers[3].from',
    /"depot" needs a volume here/
  ],
  [
    'a saturable transfer from a compartment to itself',
    () => put(withVmax(), 'transfers[3].to', 'central'),
    'transfers[3]',
    /not from "central" to itself/
  ],
  [
    'a half-saturation that is the clearance',
    () => put(withVmax(), 'transfers[3].halfSaturation', 'CL'),
    'parameters.CL',
    /is used as a clearance .* and as a drug concentration/
  ],
  [
    'an association rate of zero',
    () => put(binding(), 'parameters.kon.typical[0].value', 0),
    'parameters.kon.typical',
    /the association rate "kon" must be greater than 0, got 0 L\/nmol\/h/
  ],
  [
    'an association rate in moles without the molar mass',
    () => put(binding(), 'drug.molarMass', undefined),
    'parameters.kon.unit',
    /"L\/nmol\/h" counts moles and the model states no molar mass/
  ],
  [
    'an association rate of first order',
    () => put(binding(), 'parameters.kon.unit', '/h'),
    'parameters.kon.unit',
    /"\/h" is a unit of rate constant, not of second-order rate constant; use L\/mg\/h/
  ],
  [
    'a dissociation rate of zero',
    () => put(binding(), 'parameters.koff.typical[0].value', 0),
    'parameters.koff.typical',
    /the dissociation rate "koff" must be greater than 0/
  ],
  [
    'a negative production',
    () => put(binding(), 'parameters.kin.typical[0].value', -2),
    'parameters.kin.typical',
    /the production rate "kin" must be greater than 0, got -2 nmol\/h/
  ],
  [
    'a production per volume',
    () => put(binding(), 'parameters.kin.unit', 'nmol/L/h'),
    'parameters.kin.unit',
    /unknown unit "nmol\/L\/h"/
  ],
  [
    'a binding of two compartments',
    () => put(binding(), 'transfers[3].complex', 'central'),
    'transfers[3]',
    /drug, target and complex of a binding are three compartments; "central" is drug and complex/
  ],
  [
    'a binding whose target does not exist',
    () => put(binding(), 'transfers[3].target', 'recepter'),
    'transfers[3].target',
    /no compartment is called "recepter"; the nearest is "receptor"/
  ],
  [
    'a binding of drug without a volume',
    () => put(binding(), 'transfers[3].drug', 'depot'),
    'transfers[3].drug',
    /"depot" needs a volume here/
  ],
  [
    'a binding to an unknown approximation',
    () => put(binding(), 'transfers[3].approximation', 'quasi-equilibrium'),
    'transfers[3].approximation',
    /must be one of "none", "quasi-steady-state", got "quasi-equilibrium"$/
  ],
  [
    'a complex in a volume of its own',
    () => put(binding(), 'compartments[4].volume', 'V2'),
    'compartments[4].volume',
    /"complex" is in the volume of "central".*or name "V1"/
  ],
  [
    'a dose into a target',
    () => put(binding(), 'routes[0].into', 'receptor'),
    'routes[0].into',
    /"receptor" is a binding target, which holds no drug: it takes no dose/
  ],
  [
    'a target that is observed',
    () => put(put(binding(), 'compartments[1].observed', undefined), 'compartments[3].observed', true),
    'compartments[3].observed',
    /is a binding target, which holds no drug; show it under "observations"/
  ],
  [
    'a target that nothing produces',
    () => put(binding(), 'transfers', (binding().transfers as Json[]).slice(0, 4)),
    'transfers[3].target',
    /nothing produces the target "receptor".*add a transfer "production"/
  ],
  [
    'a target that is never lost',
    () => put(binding(), 'transfers', (binding().transfers as Json[]).slice(0, 5)),
    'transfers[3].target',
    /produced and never lost.*add an "elimination" from it/
  ],
  [
    'a production of drug',
    () => put(binding(), 'transfers[6]', { kind: 'production', into: 'central', rate: 'kin' }),
    'transfers[6].into',
    /production is of a binding's target, and "central" is none/
  ],
  [
    'an observation that adds target to free drug',
    () => put(binding(), 'observations', [{ id: 'all', of: ['central', 'receptor'] }]),
    'observations[0].of',
    /"receptor" is a binding target and "central" holds drug/
  ],
  [
    'a transfer from a complex to its target, which would lose the drug',
    () => put(binding(), 'transfers[6]', { kind: 'first-order', from: 'complex', to: 'receptor', rate: 'kdeg' }),
    'transfers[6]',
    /"receptor" is a binding target: it joins other compartments by its binding alone/
  ],
  [
    'a target that is the complex of another binding',
    () =>
      put(put(binding(), 'compartments[5]', { id: 'second' }), 'transfers[6]', {
        ...(binding().transfers as Json[])[3],
        target: 'complex',
        complex: 'second'
      }),
    'transfers[6].target',
    /"complex" is the complex of another binding \(transfers\[3\].complex\)/
  ],
  [
    'two approximated bindings of one drug',
    () => {
      const content = put(put(binding(), 'compartments[5]', { id: 'receptor2' }), 'compartments[6]', { id: 'complex2' })
      put(content, 'transfers[3].approximation', 'quasi-steady-state')
      put(content, 'transfers[6]', {
        ...(content.transfers as Json[])[3],
        target: 'receptor2',
        complex: 'complex2'
      })
      put(content, 'transfers[7]', { kind: 'production', into: 'receptor2', rate: 'kin' })
      return put(content, 'transfers[8]', { kind: 'elimination', from: 'receptor2', rate: 'kdeg' })
    },
    'transfers[6].approximation',
    /"central" takes part in another binding in quasi-steady state \(transfers\[3\]\)/
  ],
  [
    'an unknown compartment',
    change('transfers[0].to', 'centrl'),
    'transfers[0].to',
    /no compartment is called "centrl"; the nearest is "central"/
  ],
  [
    'an unknown parameter',
    change('transfers[0].rate', 'kb'),
    'transfers[0].rate',
    /no parameter is called "kb"; the nearest is "ka"/
  ],
  [
    'a parameter by a name that every object has',
    change('transfers[0].rate', 'constructor'),
    'transfers[0].rate',
    /no parameter is called "constructor"/
  ],
  [
    'an unknown covariate',
    change(`${factor}.covariate`, 'creatinineClearence'),
    `${factor}.covariate`,
    /the nearest is "creatinineClearance"/
  ],
  [
    'the dosing weight as a covariate',
    change(`${factor}.covariate`, 'dosingWeight'),
    `${factor}.covariate`,
    /never enters a covariate relation/
  ],
  [
    'a reference in an indexed unit',
    change(`${factor}.reference.unit`, 'mL/min/{1.73_m2}'),
    `${factor}.reference`,
    /an absolute rate is asked/
  ],
  ['a reference without a unit', change(`${factor}.reference`, 100), `${factor}.reference`, /reference needs a unit/],
  ['a reference of zero', change(`${factor}.reference.value`, 0), `${factor}.reference`, /must be greater than 0/],
  [
    'a category factor of a number',
    change(factor, { kind: 'category', covariate: 'weight', values: { a: 1 } }),
    `${factor}.covariate`,
    /is a number/
  ],
  ['a power of a category', change(`${factor}.covariate`, 'sex'), `${factor}.covariate`, /use a factor "category"/],
  [
    'a category without a value',
    change(factor, { kind: 'category', covariate: 'sex', values: { male: 1 } }),
    `${factor}.values`,
    /a value is missing for "female"/
  ],
  [
    'an unknown category',
    change(factor, { kind: 'category', covariate: 'sex', values: { male: 1, female: 1, man: 1 } }),
    `${factor}.values.man`,
    /has no category "man"; the nearest is "male"/
  ],
  [
    'a computed renal covariate without its equation',
    change('covariates', undefined),
    'covariates',
    /the model uses creatinineClearance; state its equation and its weight/
  ],
  [
    'an equation that does not exist',
    change('covariates.creatinineClearance.equation', 'jelliffe'),
    'covariates.creatinineClearance.equation',
    /must be "cockcroft-gault"/
  ],
  [
    'an equation without its weight',
    change('covariates.creatinineClearance.weight', undefined),
    'covariates.creatinineClearance.weight',
    /weight is missing; it must be one of "actual"/
  ],
  [
    'a covariate of the program declared',
    change('covariates.albumin', { unit: 'g/L' }),
    'covariates.albumin',
    /is known to the program/
  ],
  [
    'a covariate with unit and categories',
    change('covariates.graft', { unit: '1', categories: ['a'] }),
    'covariates.graft',
    /either a "unit" or "categories"/
  ],
  [
    'frequencies that do not sum to 1',
    change('covariates.graft', { categories: ['a', 'b'], frequencies: { a: 0.5, b: 0.4 } }),
    'covariates.graft.frequencies',
    /must sum to 1, got 0.9/
  ],
  [
    'a parameter per kg',
    change('parameters.V1.unit', 'L/kg'),
    'parameters.V1.unit',
    /never per kg, got "L\/kg"; .*factor "power" of the weight with reference 1 kg and exponent 1/
  ],
  [
    'a parameter in the wrong kind of unit',
    change(`${CL}.unit`, '/h'),
    `${CL}.unit`,
    /"\/h" is a unit of rate constant, not of clearance/
  ],
  ['an unknown unit of a parameter', change(`${CL}.unit`, 'l/hr'), `${CL}.unit`, /did you mean "L\/h"\?/],
  [
    'a parameter in units of activity',
    change('parameters.ka.unit', 'U/h'),
    'parameters.ka.unit',
    /units of activity are not handled/
  ],
  [
    'one parameter used as two things',
    change('transfers[2].clearance', 'ka'),
    'parameters.ka',
    /is used as a rate constant \(transfers\[0\].rate\) and as a clearance/
  ],
  [
    'a volume of zero',
    change('parameters.V2.typical[0].value', 0),
    'parameters.V2.typical',
    /must be greater than 0, got 0 L/
  ],
  ['a parameter without a value', change(`${CL}.typical`, []), `${CL}.typical`, /needs at least 1/],
  [
    'no observed compartment',
    change('compartments[1].observed', undefined),
    'compartments',
    /no compartment is observed/
  ],
  [
    'two observed compartments',
    change('compartments[2].observed', true),
    'compartments',
    /exactly one compartment is observed, not "central" and "peripheral"/
  ],
  [
    'an observed compartment without a volume',
    () => put(put(model('pw-101'), 'compartments[1].observed', undefined), 'compartments[0].observed', true),
    'compartments[0]',
    /needs a volume/
  ],
  [
    'two compartments of one id',
    change('compartments[2].id', 'central'),
    'compartments[2].id',
    /there is another compartment "central"/
  ],
  [
    'a clearance from a compartment without a volume',
    change('transfers[2].from', 'depot'),
    'transfers[2].from',
    /"depot" needs a volume here/
  ],
  [
    'an exchange with a compartment without a volume',
    change('transfers[1].between[1]', 'depot'),
    'transfers[1].between[1]',
    /needs a volume here/
  ],
  [
    'an exchange by nothing',
    change('transfers[1].clearance', undefined),
    'transfers[1]',
    /either "clearance" or "rates"/
  ],
  [
    'a transfer from a compartment to itself',
    change('transfers[0].to', 'depot'),
    'transfers[0]',
    /to another compartment, not from "depot" to itself/
  ],
  ['a dose into an effect site', effect('routes[0].into', 'brain'), 'routes[0].into', /is an effect site/],
  [
    'an effect site that is observed',
    () => put(put(model('pw-102'), 'compartments[0].observed', undefined), 'compartments[3].observed', true),
    'compartments[3].observed',
    /cannot be the observed compartment/
  ],
  ['an effect site with a volume', effect('compartments[3].volume', 'V1'), 'compartments[3].volume', /has no volume/],
  [
    'an exchange with an effect site',
    effect('transfers[1].between[1]', 'brain'),
    'transfers[1].between[1]',
    /is an effect site/
  ],
  [
    'an effect of a compartment without a volume',
    effect('transfers[3].from', 'fat'),
    'transfers[3].from',
    /needs a volume here/
  ],
  [
    'an observation of different volumes',
    change('observations', [{ id: 'total', of: ['central', 'peripheral'] }]),
    'observations[0].of',
    /share one volume/
  ],
  [
    'an observation with the name of a compartment',
    change('observations', [{ id: 'depot', of: ['central'] }]),
    'observations[0].id',
    /names a compartment/
  ],
  [
    'an intravenous route on an apparent model',
    change('apparent', true),
    'routes[0]',
    /"intravenous" is an intravenous route, but the model is apparent/
  ],
  [
    'an intravenous route by name alone',
    () => put(put(model('pw-101'), 'apparent', true), 'routes', [{ name: 'iv bolus', into: 'central' }]),
    'routes[0]',
    /is an intravenous route/
  ],
  [
    'a route to two places',
    change('routes[1].parts', [{ into: 'depot', fraction: 1 }]),
    'routes[1]',
    /either "into" or "parts"/
  ],
  [
    'parts that are not the whole',
    change('routes[1]', {
      name: 'oral',
      parts: [
        { into: 'depot', fraction: 0.5 },
        { into: 'central', fraction: 0.4 }
      ]
    }),
    'routes[1].parts',
    /must sum to 1, got 0.9/
  ],
  [
    'a part that is more than the whole',
    change('routes[1]', { name: 'oral', parts: [{ into: 'depot', fraction: 2 }] }),
    'routes[1].parts[0].fraction',
    /at most 1, got 2/
  ],
  ['two routes of one name', change('routes[1].name', 'intravenous'), 'routes[1].name', /there is another route/],
  ['a fraction unbound above 1', change('drug.fractionUnbound', 35), 'drug.fractionUnbound', /at most 1, got 35/],
  [
    'a limit of an unknown product',
    change('drug.limits', [{ of: 'single', value: q(1, 'g'), product: 'salt', source: 'label' }]),
    'drug.limits[0].product',
    /no product is called "salt"/
  ],
  [
    'a limit on the rate in a unit of amount',
    change('drug.limits', [{ of: 'rate', value: q(1, 'g'), source: 'label' }]),
    'drug.limits[0].value',
    /not of amount per time/
  ],
  [
    'a correlation with what does not vary',
    change('correlations[0].between[1]', 'Q'),
    'correlations[0].between[1]',
    /has no variability/
  ],
  [
    'a correlation of a parameter with itself',
    change('correlations[0].between[1]', 'CL'),
    'correlations[0].between',
    /between two parameters/
  ],
  ['an assumed number without a reason', change(`${CL}.assumed`, true), CL, /needs "because"/],
  [
    'a published model that says nothing of the studied',
    () => put(put(model('pw-101'), 'studied', undefined), 'source.kind', 'published'),
    'studied',
    /"studied" with a description is missing/
  ],
  [
    'a studied range of an unknown covariate',
    change('studied.ranges[0].covariate', 'agee'),
    'studied.ranges[0].covariate',
    /the nearest is "age"/
  ],
  [
    'a studied range in the wrong unit',
    change('studied.ranges[0].low.unit', 'h'),
    'studied.ranges[0].low',
    /not of age/
  ],
  [
    'a studied range the wrong way round',
    change('studied.ranges[0].low.value', 99),
    'studied.ranges[0]',
    /low is above high/
  ],
  [
    'a studied range of a category by number',
    change('studied.ranges[0].covariate', 'sex'),
    'studied.ranges[0]',
    /has categories/
  ],
  [
    'a check of something unknown',
    change(`${check}.what`, 'terminal halflife'),
    `${check}.what`,
    /the nearest is "terminal half-life"/
  ],
  [
    'a check of an unknown parameter',
    change(`${check}.what`, 'parameter Cl2'),
    `${check}.what`,
    /no parameter is called "Cl2"; the nearest is "CL"/
  ],
  ['a check in the wrong unit', change(`${check}.expected.unit`, 'L'), `${check}.expected`, /not of time/],
  [
    'a check of a concentration without doses',
    change(`${check}.what`, 'concentration at time'),
    `${check}.doses`,
    /needs "doses"/
  ],
  ['a check without its origin', change(`${check}.from`, undefined), `${check}.from`, /from is missing/],
  [
    'an unknown key in the patient of a check',
    change(`${check}.patient.hight`, q(1, 'm')),
    `${check}.patient.hight`,
    /nearest known key is "height"/
  ]
]

describe('a model file is refused, with the place and what would be right, for', () => {
  test.each(refused)('%s', (_, make, path, message) => {
    const issues = issuesOf(make())
    const there = issues.filter((issue) => issue.path === path)
    expect(there.map((issue) => issue.message).join('\n'), JSON.stringify(issues, null, 1)).toMatch(message)
    expect(issues.length).toBeLessThanOrEqual(3)
  })
})

describe('a model file is accepted', () => {
  test.each(readdirSync('models/drugs'))('as shipped: %s', (file) => {
    const reading = readModel(new Uint8Array(readFileSync(`models/drugs/${file}`)))
    expect(reading.ok ? [] : reading.issues).toEqual([])
  })

  test('with saturable elimination, its maximum rate in any amount per time and a Hill exponent', () => {
    expect(issuesOf(withVmax())).toEqual([])
    for (const unit of ['g/d', 'ug/min', 'umol/h']) {
      expect(issuesOf(put(withVmax(), 'parameters.Vmax.unit', unit))).toEqual([])
    }
    for (const unit of ['ug/mL', 'umol/L']) expect(issuesOf(put(withVmax(), 'parameters.Km.unit', unit))).toEqual([])
    expect(issuesOf(put(withVmax(), 'transfers[3].hill', 1.4))).toEqual([])
  })

  test('with binding, full or in quasi-steady state, a target cleared by volume and total target observed', () => {
    expect(issuesOf(binding())).toEqual([])
    expect(issuesOf(put(binding(), 'parameters.kon.unit', 'L/mg/h'))).toEqual([])
    expect(issuesOf(put(binding(), 'transfers[3].approximation', 'quasi-steady-state'))).toEqual([])
    expect(issuesOf(put(binding(), 'transfers[5]', { kind: 'clearance', from: 'receptor', clearance: 'CL' }))).toEqual(
      []
    )
    expect(issuesOf(put(binding(), 'observations', [{ id: 'target', of: ['receptor', 'complex'] }]))).toEqual([])
    expect(issuesOf(put(binding(), 'compartments[4].volume', 'V1'))).toEqual([])
  })

  test('with a covariate of its own in a unit outside the table', () => {
    const content = put(model('pw-101'), 'covariates.carbonDioxide', { unit: 'mm[Hg]' })
    put(content, factor, { kind: 'exponential', covariate: 'carbonDioxide', reference: q(0, 'mm[Hg]'), rate: 0.0233 })
    put(content, 'checks', undefined)
    expect(issuesOf(content)).toEqual([])
    expect(issuesOf(put(content, `${factor}.reference.unit`, 'kPa'))[0]?.path).toBe(`${factor}.reference`)
  })
})

describe('a model file read', () => {
  const read = (content: Json) => {
    const reading = readModel(JSON.stringify(content))
    if (!reading.ok) throw new Error(JSON.stringify(reading.issues))
    return reading
  }

  test('holds each parameter with the exact ratio of its unit', () => {
    const { drugModel } = read(put(model('pw-101'), `${CL}.unit`, 'mL/min'))
    expect(drugModel.parameters.find(({ name }) => name === 'CL')?.toCanonical).toEqual({ times: 3, per: 50 })
  })

  test('takes amounts in moles by the molar mass of the drug', () => {
    const { drugModel } = read(
      put(model('pw-101'), 'drug.limits', [{ of: 'single', value: q(2, 'mmol'), source: 'x' }])
    )
    expect(drugModel.drug.limits[0]?.value).toBe(2 * 452.3)
  })

  test('keeps the numbers beside a covariate in the unit of the file', () => {
    const { drugModel } = read(model('pw-101'))
    const power = drugModel.parameters[0]?.typical[1]?.factors[0]
    // 100 mL/min; the core carries L/h, of which one is 1000/60 = 50/3 mL/min.
    expect(power).toEqual({
      kind: 'power',
      covariate: 'creatinineClearance',
      in: { unit: 'mL/min', times: 50, per: 3 },
      reference: 100,
      exponent: 1
    })
  })

  test('converts a covariate of its own between mass units and never between mass and moles', () => {
    const content = put(model('pw-101'), 'covariates.bilirubin', { unit: 'mg/dL' })
    put(content, factor, { kind: 'power', covariate: 'bilirubin', reference: q(10, 'mg/L'), exponent: -0.1 })
    put(content, 'checks', undefined)
    expect(read(content).drugModel.parameters[0]?.typical[1]?.factors[0]).toMatchObject({
      in: { unit: 'mg/L', times: 10, per: 1 }
    })
    const [issue] = issuesOf(put(content, `${factor}.reference.unit`, 'umol/L'))
    expect(issue?.message).toMatch(/does not convert to "mg\/dL"/)
  })

  test('holds ranges in canonical units', () => {
    const { drugModel } = read(model('pw-101'))
    expect(drugModel.studied?.ranges[2]).toEqual({ covariate: 'creatinineClearance', low: 0.9, high: 8.4 })
  })

  test('counts effect sites in the order of the compartments, whatever the order of the transfers', () => {
    const content = put(model('pw-102'), 'compartments[4]', { id: 'heart' })
    put(content, 'transfers[4]', content.transfers && (content.transfers as Json[])[3])
    put(content, 'transfers[3]', { kind: 'effect', from: 'central', to: 'heart', rate: 'ke0' })
    const { drugModel } = read(content)
    const sites = drugModel.transfers.filter((transfer) => transfer.kind === 'effect').map(({ to }) => to)
    expect(sites).toEqual(['brain', 'heart'])
  })

  test('marks what was assumed, on the term that the number stands in', () => {
    const content = put(put(model('pw-101'), `${factor}.assumed`, true), `${factor}.because`, 'from memory')
    const { drugModel } = read(content)
    expect(drugModel.parameters[0]?.typical[1]?.assumed).toEqual({ because: 'from memory' })
    expect(drugModel.parameters[0]?.typical[0]?.assumed).toBeUndefined()
  })

  test('holds its checks in canonical units', () => {
    const [first] = read(model('pw-101')).checks
    expect(first).toMatchObject({
      what: 'terminal half-life',
      expected: 11.691820608101764,
      kind: 'time',
      path: 'checks[0]'
    })
    // 100 mL/min in L/h.
    expect(first?.person.numbers).toEqual({ weight: 70, creatinineClearance: 6 })
  })
})
