import { XMLParser } from 'fast-xml-parser';
import type { TextTable } from './types.js';

/** A node of the tree that keeps order and attributes as text. */
type Node = Record<string, unknown>;

/** Whether text is XML that begins like a VOTable. */
export const looksLikeVotable = (text: string): boolean =>
  /^\uFEFF?\s*(<\?xml|<!|<VOTABLE)/i.test(text.slice(0, 200)) && /<(\w+:)?VOTABLE/i.test(text.slice(0, 4000));

const PARSER = {
  ignoreAttributes: false,
  attributeNamePrefix: '@',
  removeNSPrefix: true,
  parseTagValue: false,
  parseAttributeValue: false,
  processEntities: true, // the five of XML; a document with its own is refused below, for those could grow without end
  isArray: (name: string) => ['RESOURCE', 'TABLE', 'FIELD', 'TR', 'TD', 'INFO'].includes(name),
} as const;

/**
 * The first table of a VOTable (versions 1.1 to 1.5) in TABLEDATA.
 * @throws Error with a sentence: no XML, an answer that reports an error, no table, or binary data
 */
export function readVotable(text: string): TextTable {
  if (/<!DOCTYPE/i.test(text)) throw new Error('The VOTable carries a document type of its own, which is not read. Remove it.');
  const root = rootOf(text);
  const resources = asList(root['RESOURCE']);
  const failed = resources.flatMap((r) => asList(r['INFO'])).find((i) => i['@name'] === 'QUERY_STATUS' && i['@value'] === 'ERROR');
  if (failed) throw new Error(`The VOTable reports an error of the service it came from: ${String(failed['#text'] ?? 'no reason given')}.`);
  const table = resources.flatMap((r) => asList(r['TABLE']))[0];
  if (!table) throw new Error('The VOTable holds no table.');
  const data = table['DATA'] as Node | undefined;
  if (data && !('TABLEDATA' in data)) throw new Error('The data of this VOTable are binary. Save it with TABLEDATA and try again.');
  const rows = asList((data?.['TABLEDATA'] as Node | undefined)?.['TR']);
  return {
    columns: asList(table['FIELD']).map((f) => ({
      name: attribute(f, 'name'),
      unit: attribute(f, 'unit'),
      utype: attribute(f, 'utype'),
      ucd: attribute(f, 'ucd'),
    })),
    rows: rows.map((row, i) => ({ at: i + 1, cells: (Array.isArray(row['TD']) ? row['TD'] : []).map(cellText) })),
  };
}

function rootOf(text: string): Node {
  let tree: Node;
  try {
    tree = new XMLParser(PARSER).parse(text, true) as Node;
  } catch (error) {
    throw new Error(`The file is no well-formed XML: ${error instanceof Error ? error.message : 'unknown fault'}.`, { cause: error });
  }
  const root = tree['VOTABLE'];
  if (typeof root !== 'object' || root === null) throw new Error('The file is XML but no VOTable.');
  return root as Node;
}

const asList = (value: unknown): Node[] => (Array.isArray(value) ? value : value === undefined ? [] : [value]).filter(isNode);
const isNode = (value: unknown): value is Node => typeof value === 'object' && value !== null;
const attribute = (node: Node, name: string): string => (typeof node[`@${name}`] === 'string' ? (node[`@${name}`] as string) : '');
/** A cell is text, or a node when it has attributes. */
const cellText = (cell: unknown): string => (isNode(cell) ? String(cell['#text'] ?? '') : typeof cell === 'string' ? cell : '').trim();
