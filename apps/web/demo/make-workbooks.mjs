// Writes the demo companies' .xlsx files: node apps/web/demo/make-workbooks.mjs
import { writeFileSync } from 'node:fs';
import ExcelJS from 'exceljs';

async function write(name, fill) {
  const book = new ExcelJS.Workbook();
  book.created = new Date('2026-01-05T00:00:00Z');
  book.modified = book.created;
  fill(book);
  writeFileSync(new URL(name, import.meta.url), Buffer.from(await book.xlsx.writeBuffer()));
}

const crews = [
  {
    name: 'North',
    foreman: 'Ray Sandoval',
    email: 'ray.sandoval@example.com',
    members: ['Beto Arriaga', 'Tomás Quintanilla', 'Lupe Barrón', 'Darrell Pruitt', 'Kyle Ostrander'],
  },
  {
    name: 'South',
    foreman: 'Curtis Amdahl',
    email: 'curtis.amdahl@example.com',
    members: ['Efraín Duarte', 'Chuy Montelongo', 'Odell Haines', 'Travis Mebane', 'Joanna Breck'],
  },
  {
    name: 'Big Slab',
    foreman: 'Néstor Villaseñor',
    email: 'nestor.villasenor@example.com',
    members: ['Jorge Peña', 'Silvia Cantú', 'Marcus Dillard', 'Abel Zaragoza'],
  },
  { name: 'Saw & Patch', foreman: null, email: null, members: ['Hugo Lerma', 'Wes Tillotson'] },
];

await write('cedar-flat/crews.xlsx', (book) => {
  const sheet = book.addWorksheet('Crews 2026');
  sheet.addRow(['Cedar Flat Concrete: crews']);
  sheet.mergeCells('A1:D1');
  sheet.addRow([]);
  sheet.addRow(['Crew', 'Foreman', 'Foreman e-mail', 'Members', 'Hired']);
  for (const crew of crews) {
    const first = sheet.rowCount + 1;
    for (const [index, member] of crew.members.entries()) {
      const email = crew.email === null ? null : { text: crew.email, hyperlink: `mailto:${crew.email}` };
      sheet.addRow(index === 0 ? [crew.name, crew.foreman, email, member] : [null, null, null, member]);
      const hired = sheet.getCell(first + index, 5);
      hired.value = new Date(Date.UTC(2019 + index, 3, 1 + index));
      hired.numFmt = 'm/d/yyyy';
    }
    for (const column of ['A', 'B', 'C'])
      sheet.mergeCells(`${column}${first}:${column}${first + crew.members.length - 1}`);
  }
  book.addWorksheet('Notes').addRow(['Saw & Patch has no foreman; the dispatcher leads it.']);
});

await write('prairie-line/sites.xlsx', (book) => {
  const sheet = book.addWorksheet('Obras');
  sheet.addRow([
    'Obra',
    'Cliente',
    'Dirección',
    'Ciudad',
    'Estado',
    'CP',
    'Coordenadas',
    'Desde',
    'Hasta',
    'Acceso',
  ]);
  const rows = [
    [
      'Osage shed',
      'Osage Hollow Farms',
      '7720 Hedgerow Rd',
      'Derby',
      'KS',
      67037,
      '37.5301, -97.2419',
      null,
      null,
      'Follow the hedgerow to the silo',
    ],
    [
      'Bluestem drive',
      'Fern Abernathy',
      '118 Bluestem Ct',
      'Andover',
      'KS',
      67002,
      '37.6902, -97.1218',
      7 / 24,
      18 / 24,
      null,
    ],
    [
      'Elm Fork grain',
      'Elm Fork Grain',
      '2 Elm Fork Siding',
      'Newton',
      'KS',
      67114,
      '38.0417, -97.3390',
      6 / 24,
      20 / 24,
      'Check in at the scale',
    ],
    [
      'Kechi Flats lot 7',
      'Flint Draw Homes',
      '407 Kechi Flats Dr',
      'Wichita',
      'KS',
      67220,
      '37.7706, -97.2689',
      7 / 24,
      18 / 24,
      null,
    ],
    [
      'Kechi Flats lot 8',
      'Flint Draw Homes',
      '411 Kechi Flats Dr',
      'Wichita',
      'KS',
      67220,
      '37.7707, -97.2684',
      7 / 24,
      18 / 24,
      null,
    ],
    [
      'Wren patio',
      'Otis Wren',
      '56 Osprey Pond Ln',
      'Wichita',
      'KS',
      67235,
      '37.7022, -97.4931',
      8 / 24,
      17 / 24,
      'Mind the new sod',
    ],
  ];
  for (const row of rows) {
    const added = sheet.addRow(row);
    for (const column of [8, 9]) added.getCell(column).numFmt = 'h:mm AM/PM';
  }
});
