import { clockText } from './clock-text.ts';
import { fieldLabel } from './field-labels.ts';
import type { ReasonWords } from './words.ts';

const fields = (names: readonly string[]): string =>
  names.map((name) => fieldLabel(name, 'es').toLowerCase()).join(', ');

/** Spanish sentences, in the words of US crews ("yardas", "pulgadas"). */
export const reasonWordsEs: ReasonWords = {
  number: () => 'Se esperaba un número, como 1,250 o 12.5.',
  'number-comma-style': () =>
    'Los demás números del archivo usan coma decimal: se esperaba uno como 1.250,5.',
  'number-point-style': () => 'Se esperaba un número con punto decimal, como 1,250.5.',
  thickness: () => 'Se esperaba un solo espesor, como 4", 4 in, 0\'-4" o 100 mm.',
  length: () => "Se esperaba una longitud, como 22', 22'6\" o 6.7 m.",
  dimensions: () => "Se esperaba largo por ancho, como 22' x 40' o 6.7 m x 12.2 m.",
  yards: () => 'Se esperaban yardas de concreto, como 32, 32 yd o 24.5 m3.',
  area: () => 'Se esperaba un área, como 880 sf u 82 m2.',
  'placing-rate': () => 'Se esperaban yardas por hora, como 30 o 30 yd/hr.',
  date: () => 'Se esperaba un día, como 12/8/2026 (mes primero), 2026-12-08 u 8 dic.',
  'date-month-first': () =>
    'Se esperaba el mes antes del día, como 12/28/2026, igual que en el resto del archivo.',
  'date-day-first': () =>
    'Se esperaba el día antes del mes, como 28/12/2026, igual que en el resto del archivo.',
  time: () => 'Se esperaba una hora, como 6:30, 6:30 AM o 0630.',
  'time-range': () => 'Se esperaban dos horas distintas, como 7:00 a 17:00.',
  phone: () => 'Se esperaba un teléfono que exista, como (970) 555-0123 o +52 y su número.',
  'phone-area-code': () => 'Falta el código de área, como en (970) 555-0123.',
  'phone-only-one': () => 'Se esperaba un solo teléfono: el que recibe mensajes.',
  email: () => 'Se esperaba un correo, como ana@example.com.',
  'yes-no': () => 'Se esperaba sí o no.',
  language: () => 'Se esperaba inglés o español.',
  role: () => 'Se esperaba dueño, despachador, capataz, acabador o subcontratista.',
  finish: () =>
    'Se esperaba un solo acabado: flotado, escobillado, allanado, pulido, agregado expuesto o estampado.',
  'placing-method': () => 'Se esperaba canaleta, carretilla, bomba de línea o bomba pluma.',
  'which-pump': () => 'Se esperaba cuál bomba: de línea o pluma.',
  cement: () => 'Se esperaba cemento Tipo I, II o III.',
  'time-zone': () => 'Se esperaba una zona horaria, como America/Denver o Mountain.',
  latitude: () => 'Se esperaba una latitud en grados decimales, como 40.5853.',
  longitude: () => 'Se esperaba una longitud en grados decimales, como -105.0844.',
  coordinates: () => 'Se esperaban latitud y longitud, como 40.5853, -105.0844.',
  'spreadsheet-error': () => 'La hoja muestra un error aquí: se esperaba un valor.',
  'formula-without-result': () =>
    'Se esperaba un valor; esta fórmula se guardó sin resultado. Abra el archivo, guárdelo e intente otra vez.',
  'nothing-above': () => 'Repite la celda de arriba, pero esa está vacía: se esperaba un valor.',
  'nearly-empty-row': () =>
    'Solo una celda de esta fila tiene datos: se esperaban al menos obra y medidas, día o yardas.',
  'site-missing': () => 'Se esperaba el nombre o la dirección de la obra.',
  'cannot-be-told': () => 'Sin teléfono ni correo: se puede planear con esta persona, pero no avisarle.',
  'no-quantity': () => 'Sin yardas ni medidas: el pedido habrá que calcularlo después.',
  approximate: () => 'Marcado como aproximado; se leyó el número tal cual.',
  'read-comma-decimals': () => 'Los números de este archivo se leyeron con coma decimal.',
  'read-day-first': () =>
    'Las fechas de este archivo se leyeron con el día primero, pues una no puede leerse de otro modo.',
  'thickness-unusual': () => 'Raro para una losa: revise el espesor.',
  required: (reason) => `No puede quedar vacío: ${fieldLabel(reason.field, 'es').toLowerCase()}.`,
  'column-required': ({ field }) =>
    `Ninguna columna corresponde a ${fieldLabel(field, 'es').toLowerCase()}: elija la que lo tiene.`,
  'out-of-range': ({ min, max, unit }) =>
    `Se esperaba ${min === 0 ? 'más de 0 y a lo sumo' : `de ${min} a`} ${max.toLocaleString('en-US')} ${unit}.`,
  'weekday-disagrees': ({ day }) => `El día de la semana y la fecha no concuerdan: ${day} cae en otro día.`,
  'longitude-sign': ({ suggested }) => `En EE. UU. las longitudes son negativas: se esperaba ${suggested}.`,
  'too-many-cells': ({ count, headings }) =>
    `Esta fila tiene ${count} celdas bajo ${headings} encabezados: las comas dentro de una celda van entre comillas.`,
  'email-shared': ({ line }) =>
    `La línea ${line} tiene este correo con otro nombre: se esperaba una persona por correo.`,
  'phone-shared': ({ line }) => `La línea ${line} tiene el mismo teléfono con otro nombre.`,
  'duplicate-differs': ({ line, fields: names }) =>
    `Se omitió por repetir la línea ${line}, aunque difieren: ${fields(names)}.`,
  'job-ref-shared': ({ line }) =>
    `La línea ${line} tiene el mismo número de obra y nombre con otro día u otras yardas; se guardan ambas.`,
  assumed: ({ assumed }, field) => `${field}: vacío; se leyó como ${assumed}.`,
  'column-missing': ({ assumed }, field) =>
    `Sin columna para ${field.toLowerCase()}: todas las filas se leen como ${assumed}.`,
  'read-as': ({ assumed }) => `Se leyó como ${assumed}.`,
  'copied-from-above': ({ assumed }) => `Repite la celda de arriba: se leyó como ${assumed}.`,
  'year-assumed': ({ day }) => `Sin año: se leyó como ${day}.`,
  'day-far': ({ day }) => `${day} queda a más de un año: revise el año.`,
  'half-day-assumed': ({ minute }) => `Sin AM ni PM: se leyó como las ${clockText(minute)} de la madrugada.`,
  converted: ({ from, to }) => `${from} se convirtió a ${to}.`,
  'left-out': ({ text }) => `Se omitió: ${text}.`,
  'kept-in-notes': ({ text }) => `Dice más de una palabra; "${text}" quedó también en las notas.`,
  'yards-against-size': ({ orderedYd3, computedYd3 }) =>
    `Pedido de ${orderedYd3} yd, pero las medidas dan ${computedYd3} yd.`,
  'thickness-differs': ({ other }) => `Las medidas dicen ${other} in; se usó esta columna.`,
};
