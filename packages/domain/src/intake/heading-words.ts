import type { IntakeField, IntakeKind } from './fields.ts';

/**
 * Names of a column: `sure` says it by itself, `likely` could mean something else in another office's sheet, so it
 * is suggested with low confidence. Written folded; common practice, no source.
 */
export interface HeadingWords {
  readonly sure: readonly string[];
  readonly likely?: readonly string[];
}

const words = (list: string): readonly string[] => list.split(', ');

type Words = { readonly [K in IntakeKind]: Readonly<Partial<Record<IntakeField, HeadingWords>>> };

/** The headings of contractors' sheets, English and Spanish. */
export const headingWords: Words = {
  people: {
    name: {
      sure: words(
        'name, full name, employee, employee name, person, worker, nombre, nombre completo, empleado, trabajador',
      ),
      likely: words('crew member, finisher, who, quien'),
    },
    firstName: { sure: words('first name, first, given name, nombre de pila, primer nombre') },
    lastName: { sure: words('last name, last, surname, family name, apellido, apellidos') },
    phone: {
      sure: words(
        'phone, cell, cell phone, phone no, phone number, cell no, cell number, mobile no, mobile number, no de telefono, numero de telefono, cellphone, mobile, mobile phone, tel, telephone, celular, cel, movil, telefono, telefono celular, text',
      ),
      likely: words('contact, home phone, work phone, contacto'),
    },
    email: {
      sure: words('email, e mail, mail, email address, e mail address, correo, correo electronico'),
    },
    role: {
      sure: words('role, position, job title, title, puesto, rol, cargo'),
      likely: words('type, trade, job, tipo, oficio, class'),
    },
    crewName: { sure: words('crew, crew name, team, gang, cuadrilla, equipo, grupo') },
    language: {
      sure: words('language, lang, idioma, lengua, reads, preferred language'),
      likely: words('speaks, habla'),
    },
    skills: {
      sure: words('skills, skill, finishes, can finish, habilidades, acabados'),
      likely: words('does, finish, acabado, experience'),
    },
  },
  crews: {
    name: {
      sure: words('crew, crew name, name, team, gang, cuadrilla, equipo, nombre, nombre de cuadrilla'),
    },
    foremanName: {
      sure: words(
        'foreman, foreman name, lead, crew lead, crew leader, leader, capataz, mayordomo, encargado, lead man',
      ),
      likely: words('super, boss, jefe'),
    },
    foremanEmail: {
      sure: words('foreman email, foreman e mail, lead email, email, e mail, correo, correo del capataz'),
    },
    memberNames: {
      sure: words(
        'members, member, crew members, crew member, finishers, finisher, people, men, miembros, miembro, integrantes, acabadores, gente',
      ),
      likely: words('employee, worker, hands'),
    },
  },
  sites: {
    name: {
      sure: words(
        'site, site name, job, job name, jobsite, job site, project, project name, name, obra, nombre, sitio, proyecto, trabajo',
      ),
    },
    address: {
      sure: words(
        'address, addr, street, street address, site address, job address, direccion, domicilio, calle',
      ),
      likely: words('location, loc, where, ubicacion, lugar'),
    },
    city: { sure: words('city, town, ciudad') },
    state: { sure: words('state, st, estado') },
    zip: { sure: words('zip, zip code, zipcode, postal code, codigo postal, cp') },
    latitude: { sure: words('latitude, lat, latitud'), likely: words('y') },
    longitude: { sure: words('longitude, lon, long, lng, longitud'), likely: words('x') },
    coordinates: {
      sure: words('coordinates, coords, lat lon, lat long, lat lng, latlong, gps, pin, coordenadas'),
    },
    timeZone: { sure: words('time zone, timezone, tz, zona horaria, huso horario') },
    customerName: {
      sure: words(
        'customer, customer name, client, builder, gc, general contractor, cliente, constructora, contratista',
      ),
      likely: words('owner, for, bill to, dueno'),
    },
    accessNotes: {
      sure: words('access, access notes, gate, gate code, site notes, directions, acceso, notas de acceso'),
      likely: words('notes, note, comments, remarks, notas, comentarios'),
    },
    permittedFrom: {
      sure: words('permitted from, hours from, earliest, no earlier than, not before, work from, desde'),
      likely: words('from, start, open, opens'),
    },
    permittedUntil: {
      sure: words(
        'permitted until, hours until, hours to, latest, no later than, not after, work until, hasta',
      ),
      likely: words('until, to, end, close, closes'),
    },
    permittedHours: {
      sure: words(
        'hours, work hours, permitted hours, allowed hours, noise hours, site hours, horario, horas permitidas',
      ),
    },
  },
  pours: {
    siteName: {
      sure: words(
        'site, site name, job, job name, jobsite, job site, project, project name, obra, sitio, proyecto, nombre de obra, trabajo',
      ),
      likely: words('where, donde, lugar'),
    },
    siteAddress: {
      sure: words(
        'address, addr, street, street address, site address, job address, direccion, domicilio, calle',
      ),
      likely: words('location, loc, ubicacion'),
    },
    name: {
      sure: words(
        'pour, pour name, slab, description, desc, scope, what, area name, item, colado, losa, descripcion',
      ),
      likely: words('name, work, task, nombre, element, section'),
    },
    wantedOn: {
      sure: words(
        'wanted, wanted on, wanted for, pour date, date wanted, date, requested, requested date, needed, need by, fecha, fecha de colado, dia',
      ),
      likely: words(
        'day, when, schedule, scheduled, target, start date, cuando, delivery date, date requested, due, due date',
      ),
    },
    orderedYd3: {
      sure: words(
        'yds, yd, cy, yards, yardage, yd3, cu yd, cu yds, cuyd, cubic yards, yds ordered, yards ordered, ordered yds, ordered yards, cy ordered, order yds, yds order, ordered, yds3, concrete yds, yardas, yardaje, m3',
      ),
      likely: words('qty, quantity, volume, vol, order, amount, cantidad, volumen, concrete'),
    },
    thicknessIn: {
      sure: words('thickness, thk, thick, thickn, slab thickness, espesor, grosor, grueso'),
      likely: words('depth, deep, height, profundidad, in, t'),
    },
    dimensions: {
      sure: words(
        'dimensions, dims, dim, size, l x w, lxw, w x l, wxl, length x width, medidas, dimensiones, tamano',
      ),
    },
    lengthFt: { sure: words('length, len, largo, longitud'), likely: words('l') },
    widthFt: { sure: words('width, wide, wid, ancho'), likely: words('w') },
    areaFt2: {
      sure: words('sf, sq ft, sqft, sq feet, square feet, square footage, ft2, area, m2, pies cuadrados'),
      likely: words('sq, footage, feet'),
    },
    finish: {
      sure: words('finish, finish type, surface, surface finish, fin, acabado, tipo de acabado'),
      likely: words('type, texture, tipo'),
    },
    placingMethod: {
      sure: words(
        'placing, placing method, placement, place by, method, pump, chute pump, chute or pump, colocacion, metodo, bomba',
      ),
      likely: words('how, access, delivery, como'),
    },
    mixName: {
      sure: words('mix, mix design, mix name, mix id, mix code, mezcla'),
      likely: words('psi, concrete mix, strength, resistencia'),
    },
    placingRateYd3PerHour: {
      sure: words(
        'yd hr, yds hr, cy hr, yards per hour, yph, placing rate, pour rate, rate, yardas por hora',
      ),
      likely: words('speed, ritmo'),
    },
    firstLoad: {
      sure: words(
        'first load, first truck, truck time, 1st truck, 1st load, start time, pour time, time, first on, hora, primer camion, primera carga',
      ),
      likely: words('start, at, inicio, on site'),
    },
    notes: {
      sure: words('notes, note, comments, comment, remarks, instructions, notas, comentarios, observaciones'),
    },
    jobRef: {
      sure: words(
        'job no, job number, job ref, job id, job code, ref, reference, po, po no, po number, work order, wo, no de obra, referencia, folio',
      ),
      likely: words('no, number, id, numero'),
    },
  },
};
