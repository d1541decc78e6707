import { CAUTION } from './caution'
import { PROGRAM_VERSION } from './version'

/** A column as a reader must know it: its name in the header, what it holds and in which UCUM unit. */
export interface ColumnMeaning {
  readonly name: string
  readonly description: string
  readonly datatype: 'string' | 'number' | 'integer' | 'boolean'
  /** UCUM; absent for text. */
  readonly unit?: string
}

/**
 * The metadata file that stands beside a CSV, after W3C "Metadata Vocabulary for Tabular Data" (CSVW, 2015):
 * the caution first, then the program's version, the study's hash and the meaning and unit of each column.
 */
export function csvwMetadata(table: {
  readonly url: string
  readonly title: string
  readonly hash: string
  readonly cautions: readonly string[]
  readonly columns: readonly ColumnMeaning[]
}): string {
  const document = {
    '@context': 'http://www.w3.org/ns/csvw',
    'rdfs:comment': [CAUTION, ...table.cautions],
    url: table.url,
    'dc:title': table.title,
    'schema:softwareVersion': `Phasewise ${PROGRAM_VERSION}`,
    'schema:sha256': table.hash,
    dialect: { encoding: 'utf-8', lineTerminators: ['\r\n'], delimiter: ',', header: true },
    tableSchema: {
      columns: table.columns.map((column) => ({
        name: column.name,
        titles: column.name,
        datatype: column.datatype,
        'dc:description': column.description,
        ...(column.unit === undefined ? {} : { 'schema:unitText': column.unit })
      }))
    }
  }
  return `${JSON.stringify(document, null, 2)}\n`
}
