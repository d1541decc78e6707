import { readFileSync } from 'node:fs'

/** A JSON value that tests change before it is read. */
export type Json = { [key: string]: unknown }

/** Content of a shipped model file by its id; undefined for an id that is none. */
export function shippedModel(id: string): unknown {
  return /^[a-z0-9-]+$/.test(id) && ids.has(id) ? model(id) : undefined
}

const ids = new Set(Array.from({ length: 12 }, (_, i) => `pw-${101 + i}`))

/** A fresh copy of a shipped model. */
export function model(id: string): Json {
  return JSON.parse(readFileSync(`models/drugs/${id}.json`, 'utf8'))
}

/** A fresh study that uses every block of the format. */
export function study(): Json {
  return JSON.parse(`{
    "format": "phasewise-study", "version": 1,
    "title": "PW-101 in a 71-year-old with reduced renal function: 12, 18 or 24 hours?",
    "model": "pw-101",
    "patient": {
      "sex": "female", "age": { "value": 71, "unit": "a" }, "weight": { "value": 58, "unit": "kg" }, "height": { "value": 162, "unit": "cm" },
      "serumCreatinine": { "value": 1.6, "unit": "mg/dL" },
      "changes": [ { "at": { "value": 72, "unit": "h" }, "serumCreatinine": { "value": 1.9, "unit": "mg/dL" } } ]
    },
    "regimens": [
      { "name": "750 mg every 24 h", "start": "empty",
        "doses": [
          { "route": "intravenous", "amount": { "value": 20, "unit": "mg/kg" }, "atMost": { "value": 2, "unit": "g" }, "over": { "value": 2, "unit": "h" }, "at": { "value": 0, "unit": "h" } },
          { "route": "intravenous", "amount": { "value": 750, "unit": "mg" }, "over": { "value": 1, "unit": "h" },
            "at": { "value": 24, "unit": "h" }, "every": { "value": 24, "unit": "h" }, "count": 6,
            "exceptions": [ { "number": 2, "missed": true }, { "number": 3, "lateBy": { "value": 3, "unit": "h" } }, { "number": 4, "stoppedAfter": { "value": 20, "unit": "min" } } ] },
          { "route": "intravenous", "rate": { "value": 0.5, "unit": "mg/kg/h" }, "over": { "value": 30, "unit": "min" }, "at": { "value": 150, "unit": "h" } },
          { "route": "oral", "amount": { "value": 500, "unit": "mg" }, "at": { "value": 160, "unit": "h" } }
        ] }
    ],
    "targets": [
      { "kind": "window", "when": "throughout", "share": 0.9, "low": { "value": 10, "unit": "mg/L" }, "high": { "value": 50, "unit": "mg/L" } },
      { "kind": "auc24", "when": "steady-state", "role": "efficacy", "low": { "value": 400, "unit": "mg.h/L" }, "high": { "value": 600, "unit": "mg.h/L" } },
      { "kind": "trough", "when": "every-interval", "role": "safety", "high": { "value": 20, "unit": "mg/L" } },
      { "kind": "level", "after": { "value": 1, "unit": "h" }, "from": "dose end", "low": { "value": 25, "unit": "mg/L" } },
      { "kind": "time-above", "when": "day-1", "timesMic": 4, "unbound": true, "share": 0.5 }
    ],
    "mic": { "value": 1, "unit": "mg/L" },
    "now": { "value": 60, "unit": "h" },
    "sampling": { "until": { "value": 168, "unit": "h" }, "every": { "value": 0.5, "unit": "h" }, "also": [ { "value": 0.05, "unit": "h" } ] },
    "clock": "21:15",
    "display": { "time": "h", "concentration": "mg/L", "amount": "mg", "unbound": false },
    "cohort": { "size": 4000, "seed": 20261 },
    "plan": { "routes": ["intravenous"], "strengths": [ { "value": 250, "unit": "mg" } ], "intervals": [ { "value": 12, "unit": "h" } ] },
    "levels": [ { "at": { "value": 35.5, "unit": "h" }, "value": { "value": 14.2, "unit": "mg/L" }, "regimen": "750 mg every 24 h" } ]
  }`)
}

/** Put a value at a place like `regimens[0].doses[1].amount`; undefined takes the key away. */
export function put(root: Json, path: string, value: unknown): Json {
  const steps = path.match(/[^.[\]]+/g) ?? []
  const last = steps.pop()
  let place = root
  for (const step of steps) {
    place[step] ??= {}
    place = place[step] as Json
  }
  if (last === undefined) throw new RangeError('a path has at least one step')
  if (value === undefined) delete place[last]
  else place[last] = value
  return root
}

/** A quantity in fewer letters. */
export function q(value: number, unit: string): { value: number; unit: string } {
  return { value, unit }
}
