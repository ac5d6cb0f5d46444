import type { Language } from '@strikeboard/domain/vocabulary';

/** What a file can turn out to be when it is no sheet that can be read. */
export type WrongFile =
  | 'old-excel'
  | 'binary-excel'
  | 'excel-xml'
  | 'open-document'
  | 'apple-numbers'
  | 'pdf'
  | 'web-page'
  | 'picture'
  | 'word-document'
  | 'zip'
  | 'not-text';

/** Why a file cannot be read, as facts. Codes are stable. */
export type SheetFault =
  | { readonly code: 'wrong-file'; readonly found: WrongFile }
  | { readonly code: 'password' }
  | { readonly code: 'empty' }
  | { readonly code: 'broken' }
  | { readonly code: 'too-big'; readonly limitMb: number }
  | { readonly code: 'too-many-rows' | 'too-many-columns'; readonly limit: number }
  /** Unpacked it is out of all proportion, or it takes longer or more memory than any real sheet. */
  | { readonly code: 'too-complex' }
  /** A quote mark opens a cell and never closes it, or closes it too early. `line` counts from 1. */
  | { readonly code: 'broken-quotes'; readonly line: number };

/** A file that cannot be read as a sheet; `message` is the English sentence. */
export class SheetProblem extends Error {
  readonly fault: SheetFault;

  constructor(fault: SheetFault) {
    super(sheetSentence(fault, 'en'));
    this.name = 'SheetProblem';
    this.fault = fault;
  }
}

/** One sentence on what is wrong with the file and one on the way out. */
export function sheetSentence(fault: SheetFault, language: Language): string {
  const words = language === 'en' ? english : spanish;
  switch (fault.code) {
    case 'wrong-file':
      return words.wrongFile[fault.found];
    case 'too-big':
      return words.tooBig(fault.limitMb);
    case 'too-many-rows':
      return words.tooManyRows(fault.limit);
    case 'too-many-columns':
      return words.tooManyColumns(fault.limit);
    case 'broken-quotes':
      return words.brokenQuotes(fault.line);
    default:
      return words[fault.code];
  }
}

interface SheetWords {
  readonly wrongFile: Readonly<Record<WrongFile, string>>;
  readonly password: string;
  readonly empty: string;
  readonly broken: string;
  readonly 'too-complex': string;
  tooBig(limitMb: number): string;
  tooManyRows(limit: number): string;
  tooManyColumns(limit: number): string;
  brokenQuotes(line: number): string;
}

const english: SheetWords = {
  wrongFile: {
    'old-excel':
      'This is an Excel file of the old kind (.xls). Save it as Excel Workbook (.xlsx) or CSV and choose that file.',
    'binary-excel':
      'This is a binary Excel file (.xlsb). Save it as Excel Workbook (.xlsx) or CSV and choose that file.',
    'excel-xml':
      'This is an Excel file of the XML kind. Save it as Excel Workbook (.xlsx) or CSV and choose that file.',
    'open-document': 'This is an OpenDocument sheet (.ods). Save it as .xlsx or CSV and choose that file.',
    'apple-numbers': 'This is a Numbers file. Export it as Excel or CSV and choose that file.',
    pdf: 'This is a PDF, not a spreadsheet. Choose the .xlsx or CSV file that it was made from.',
    'web-page':
      "This is a web page with a spreadsheet's name. Open it in Excel, save it as .xlsx or CSV and choose that file.",
    picture: 'This is a picture, not a spreadsheet. Choose an .xlsx or CSV file.',
    'word-document': 'This is a text document, not a spreadsheet. Choose an .xlsx or CSV file.',
    zip: 'This is a packed folder, not a spreadsheet. Unpack it and choose the .xlsx or CSV file in it.',
    'not-text': 'This is no spreadsheet that we can read. Choose an .xlsx or CSV file.',
  },
  password: 'This file is protected by a password. Remove the password, save it and choose it again.',
  empty: 'This file has no filled cells. Choose the file that has the rows in it.',
  broken:
    'This file is damaged or was only partly copied. Open it in your spreadsheet program, save it and choose it again.',
  'too-complex':
    'This file is far larger inside than a list of rows should be. Copy the rows into a new sheet and choose that file.',
  tooBig: (limitMb) =>
    `This file is larger than ${limitMb} MB. Split it, or remove pictures and unused sheets.`,
  tooManyRows: (limit) =>
    `This file has more than ${limit.toLocaleString('en-US')} rows. Split it into smaller files.`,
  tooManyColumns: (limit) => `This file has more than ${limit} columns. Keep only the columns to import.`,
  brokenQuotes: (line) =>
    `The quote marks do not match at line ${line}. Write inch marks inside quoted cells twice, or save the sheet as .xlsx.`,
};

const spanish: SheetWords = {
  wrongFile: {
    'old-excel':
      'Es un archivo de Excel antiguo (.xls). Guárdelo como Libro de Excel (.xlsx) o CSV y elija ese archivo.',
    'binary-excel':
      'Es un archivo de Excel binario (.xlsb). Guárdelo como Libro de Excel (.xlsx) o CSV y elija ese archivo.',
    'excel-xml':
      'Es un archivo de Excel en XML. Guárdelo como Libro de Excel (.xlsx) o CSV y elija ese archivo.',
    'open-document': 'Es una hoja OpenDocument (.ods). Guárdela como .xlsx o CSV y elija ese archivo.',
    'apple-numbers': 'Es un archivo de Numbers. Expórtelo a Excel o CSV y elija ese archivo.',
    pdf: 'Es un PDF, no una hoja de cálculo. Elija el archivo .xlsx o CSV del que se hizo.',
    'web-page':
      'Es una página web con nombre de hoja de cálculo. Ábrala en Excel, guárdela como .xlsx o CSV y elija ese archivo.',
    picture: 'Es una imagen, no una hoja de cálculo. Elija un archivo .xlsx o CSV.',
    'word-document': 'Es un documento de texto, no una hoja de cálculo. Elija un archivo .xlsx o CSV.',
    zip: 'Es una carpeta comprimida, no una hoja de cálculo. Descomprímala y elija el archivo .xlsx o CSV.',
    'not-text': 'No es una hoja de cálculo que podamos leer. Elija un archivo .xlsx o CSV.',
  },
  password: 'Este archivo tiene contraseña. Quítela, guárdelo y elíjalo otra vez.',
  empty: 'Este archivo no tiene celdas con datos. Elija el archivo que tiene las filas.',
  broken:
    'Este archivo está dañado o incompleto. Ábralo en su programa de hojas de cálculo, guárdelo y elíjalo otra vez.',
  'too-complex':
    'Este archivo es por dentro mucho más grande que una lista de filas. Copie las filas a una hoja nueva y elija ese archivo.',
  tooBig: (limitMb) => `Este archivo pasa de ${limitMb} MB. Divídalo o quite imágenes y hojas sin usar.`,
  tooManyRows: (limit) =>
    `Este archivo tiene más de ${limit.toLocaleString('en-US')} filas. Divídalo en archivos más pequeños.`,
  tooManyColumns: (limit) =>
    `Este archivo tiene más de ${limit} columnas. Deje solo las columnas por importar.`,
  brokenQuotes: (line) =>
    `Las comillas no cierran bien en la línea ${line}. Escriba dos veces las comillas de pulgada dentro de celdas entrecomilladas, o guarde la hoja como .xlsx.`,
};
