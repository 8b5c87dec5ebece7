import { settleAxis } from '../columns/axis.js';
import { mediumWord, words } from '../columns/words.js';
import { columnFacts, statedKind, uncorrectedColumns } from '../columns/choose.js';
import { fluxKindOf, settleFluxUnit } from '../columns/flux-kind.js';
import { stated } from '../columns/medium.js';
import type { ReadContext } from '../context.js';
import type { RawSpectrum } from '../raw.js';
import { chooseTextColumns } from './columns.js';
import { decodeText } from './decode.js';
import { readPreamble } from './preamble.js';
import { readRemarks } from './remarks.js';
import { readRows } from './rows.js';

/** A spectrum from a text table: comma, semicolon, tab or blanks between the cells, headings or none, remarks or none. */
export function readText(context: ReadContext): RawSpectrum {
  const { bytes, corrections, limits, warnings } = context;
  const text = decodeText(bytes, warnings);
  const preamble = readPreamble(text, limits, corrections);
  const { infos, choice, byPosition } = chooseTextColumns(preamble, corrections, warnings);
  const wanted = [choice.axis, choice.flux, ...[choice.uncertainty, choice.mask].filter((index) => index !== null)];
  const nameOf = (index: number) => infos[index]!.name;
  const rows = readRows(text, preamble, wanted, wanted.map(nameOf), limits, warnings);
  const remarks = readRemarks(preamble.remarks);
  const axisInfo = infos[choice.axis]!;
  const fluxInfo = infos[choice.flux]!;
  const unit = axisInfo.unit || remarks.axisUnit;
  const where = axisInfo.unit ? 'column name' : remarks.axisUnitWhere;
  const axis = settleAxis(rows.columns[0]!, { name: axisInfo.name, quantity: choice.quantity, unit, where }, context);
  const word = mediumWord(axisInfo.name);
  const place = `line ${preamble.firstLine} onwards`;
  const fluxUnit = settleFluxUnit(fluxInfo.unit || remarks.fluxUnit, fluxInfo.unit ? 'column name' : 'remark', corrections);
  return {
    format: 'text',
    place,
    places: [{ place, name: '', kind: 'text', rows: rows.lines.length, isSpectrum: true, why: '' }],
    checksums: [],
    columnFacts: columnFacts(infos, choice),
    uncorrectedColumns: uncorrectedColumns(infos, corrections),
    header: [...preamble.remarks, ...rows.remarks],
    axisName: axisInfo.name,
    axis,
    medium: word ? stated(word, 'column name') : remarks.medium,
    flux: rows.columns[1]!,
    fluxName: fluxInfo.name,
    fluxUnit,
    fluxKind: fluxKindOf({ name: bareName(fluxInfo.name), unit: fluxUnit.value, ucd: '' }, fluxUnit.where, false),
    uncertainty:
      choice.uncertainty === null
        ? null
        : {
            values: rows.columns[2]!,
            name: nameOf(choice.uncertainty),
            kind: statedKind(
              choice.uncertaintyKind,
              byPosition ? { how: 'assumed', where: 'order of the columns' } : { how: 'stated', where: 'column name' },
              corrections,
            ),
          },
    mask: choice.mask === null ? null : { values: rows.columns.at(-1)!, name: nameOf(choice.mask) },
    orders: null,
    locate: (i) => ({ words: `line ${rows.lines[i]!}`, row: rows.lines[i]! }),
    facts: remarks.facts,
    warnings,
  };
}

const bareName = (name: string): string => words(name.replace(/[([].*$/, '')).join('_');
