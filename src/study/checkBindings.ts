import type { ModelFile } from './file/modelSchema'
import { bindingsOf, type ModelNames } from './modelNames'
import { below } from './path'
import { open } from './soundMembers'

/**
 * What makes a binding one of drug, target and complex, and a production one of a target: three places, one volume, a
 * target that the body makes and loses, and no drug in the place of the target nor target in the place of drug.
 */
export function checkBindings(file: ModelFile, path: string, names: ModelNames): void {
  const { problems } = names
  const bindings = bindingsOf(file, path, problems)
  for (const [at, binding] of bindings) checkTrio(at, binding, names)
  checkRoles(bindings, names)
  checkApproximated(bindings, names)
  const targets = new Set(bindings.map(([, { target }]) => target))
  const volumes = new Map(
    bindings.flatMap(([, { drug, target, complex }]) => {
      const volume = names.compartments.get(drug)?.volume
      return volume === undefined ? [] : [[target, [drug, volume]] as const, [complex, [drug, volume]] as const]
    })
  )
  for (const [at, compartment] of open(file.compartments, below(path, 'compartments'), problems)) {
    const shared = volumes.get(compartment.id)
    if (shared !== undefined && compartment.volume !== undefined && compartment.volume !== shared[1]) {
      problems.add(
        below(at, 'volume'),
        `"${compartment.id}" is in the volume of "${shared[0]}", which it binds in; leave its own out, or name "${shared[1]}"`
      )
    }
    if (compartment.observed === true && targets.has(compartment.id)) {
      problems.add(
        below(at, 'observed'),
        `"${compartment.id}" is a binding target, which holds no drug; show it under "observations" instead`
      )
    }
  }
  checkDoses(file, path, targets, names)
  checkObservations(file, path, bindings, names)
  const turnover = checkMovements(file, path, targets, names)
  if (problems.isSound(below(path, 'transfers'))) checkTurnover(bindings, turnover, names)
}

type Bindings = ReturnType<typeof bindingsOf>
type BindingFile = Bindings[number][1]

const ROLES = ['drug', 'target', 'complex'] as const

function checkTrio(at: string, binding: BindingFile, { problems }: ModelNames): void {
  const ids = ROLES.map((role) => binding[role])
  const twice = ids.find((id, i) => ids.indexOf(id) < i)
  if (twice === undefined) return
  const which = ROLES.filter((role) => binding[role] === twice).join(' and ')
  problems.add(at, `drug, target and complex of a binding are three compartments; "${twice}" is ${which}`)
}

/** A target is a target in every binding, and a complex comes from one of them. */
function checkRoles(bindings: Bindings, { problems }: ModelNames): void {
  for (const [at, { target, complex }] of bindings) {
    for (const [other, binding] of bindings) {
      if (other === at) continue
      if (binding.drug === target || binding.complex === target) {
        const role = binding.drug === target ? 'drug' : 'complex'
        problems.add(below(at, 'target'), `"${target}" is the ${role} of another binding (${other}.${role})`)
      }
      if (other < at && binding.complex === complex) {
        problems.add(below(at, 'complex'), `"${complex}" is the complex of another binding (${other}.complex)`)
      }
    }
  }
}

/** Two approximated bindings that share a compartment would each need the other's answer. */
function checkApproximated(bindings: Bindings, { problems }: ModelNames): void {
  const approximated = bindings.filter(([, { approximation }]) => approximation === 'quasi-steady-state')
  const taken = new Map<string, string>()
  for (const [at, binding] of approximated) {
    for (const role of ROLES) {
      const earlier = taken.get(binding[role])
      if (earlier !== undefined && earlier !== at) {
        problems.add(
          below(at, 'approximation'),
          `"${binding[role]}" takes part in another binding in quasi-steady state (${earlier}); only bindings of separate compartments can be approximated, use "none"`
        )
      }
      taken.set(binding[role], at)
    }
  }
}

function checkDoses(file: ModelFile, path: string, targets: ReadonlySet<string>, { problems }: ModelNames): void {
  const check = (into: string | undefined, at: string): void => {
    if (into === undefined || !targets.has(into)) return
    problems.add(below(at, 'into'), `"${into}" is a binding target, which holds no drug: it takes no dose`)
  }
  for (const [at, route] of open(file.routes, below(path, 'routes'), problems)) {
    check(route.into, at)
    for (const [i, part] of (route.parts ?? []).entries()) check(part.into, below(below(at, 'parts'), i))
  }
}

/** An observation adds up drug, free and bound, or target, free and bound, and not the one to the other. */
function checkObservations(file: ModelFile, path: string, bindings: Bindings, { problems }: ModelNames): void {
  for (const [at, { of }] of open(file.observations, below(path, 'observations'), problems)) {
    const target = of.find((id) => bindings.some(([, binding]) => binding.target === id))
    const drug = of.find((id) => !bindings.some(([, binding]) => binding.target === id || binding.complex === id))
    if (target === undefined || drug === undefined) continue
    problems.add(
      below(at, 'of'),
      `"${target}" is a binding target and "${drug}" holds drug; they are not one substance`
    )
  }
}

/**
 * Nothing moves between a target and another compartment but by binding: the masses are of different substances.
 * Gives what is produced and what leaves the body by itself.
 */
function checkMovements(
  file: ModelFile,
  path: string,
  targets: ReadonlySet<string>,
  { problems, compartments }: ModelNames
): { readonly produced: ReadonlySet<string>; readonly lost: ReadonlySet<string> } {
  const produced = new Set<string>()
  const lost = new Set<string>()
  for (const [at, transfer] of open(file.transfers, below(path, 'transfers'), problems)) {
    switch (transfer.kind) {
      case 'binding':
        break
      case 'production':
        produced.add(transfer.into)
        if (compartments.has(transfer.into) && !targets.has(transfer.into)) {
          problems.add(below(at, 'into'), `production is of a binding's target, and "${transfer.into}" is none`)
        }
        break
      case 'clearance':
      case 'elimination':
        lost.add(transfer.from)
        break
      default: {
        const [from, to] = transfer.kind === 'exchange' ? transfer.between : [transfer.from, transfer.to]
        if (to === undefined) {
          lost.add(from)
          break
        }
        const target = [from, to].find((end) => targets.has(end))
        if (target === undefined) break
        problems.add(
          at,
          `"${target}" is a binding target: it joins other compartments by its binding alone; what leaves the body does so by "elimination", "clearance" or "saturable" without "to"`
        )
      }
    }
  }
  return { produced, lost }
}

/** Without production there would never be any target, and without a way out ever more of it. */
function checkTurnover(
  bindings: Bindings,
  { produced, lost }: ReturnType<typeof checkMovements>,
  { problems, compartments }: ModelNames
): void {
  for (const [at, { target }] of bindings) {
    if (!compartments.has(target)) continue
    if (!produced.has(target)) {
      problems.add(
        below(at, 'target'),
        `nothing produces the target "${target}", so that there is none to bind; add a transfer "production" into it`
      )
    } else if (!lost.has(target)) {
      problems.add(
        below(at, 'target'),
        `the target "${target}" is produced and never lost, so that it has no drug-free steady state; add an "elimination" from it`
      )
    }
  }
}
