import type { Language } from '../vocabulary.ts';
import type { IntakeField } from './fields.ts';

/** A field's name on screen; unknown names come back as they are. */
export function fieldLabel(field: string, language: Language): string {
  const labels = new Map<string, readonly [string, string]>(Object.entries(LABELS));
  const label = labels.get(field);
  return label === undefined ? field : label[language === 'en' ? 0 : 1];
}

const LABELS: Readonly<Record<IntakeField, readonly [string, string]>> = {
  name: ['Name', 'Nombre'],
  firstName: ['First name', 'Nombre de pila'],
  lastName: ['Last name', 'Apellido'],
  phone: ['Phone', 'Teléfono'],
  email: ['E-mail', 'Correo'],
  role: ['Role', 'Puesto'],
  crewName: ['Crew', 'Cuadrilla'],
  language: ['Language', 'Idioma'],
  skills: ['Finishes they can do', 'Acabados que sabe hacer'],
  foremanName: ['Foreman', 'Capataz'],
  foremanEmail: ["Foreman's e-mail", 'Correo del capataz'],
  memberNames: ['Members', 'Integrantes'],
  address: ['Address', 'Dirección'],
  city: ['City', 'Ciudad'],
  state: ['State', 'Estado'],
  zip: ['Zip', 'Código postal'],
  latitude: ['Latitude', 'Latitud'],
  longitude: ['Longitude', 'Longitud'],
  coordinates: ['Coordinates', 'Coordenadas'],
  timeZone: ['Time zone', 'Zona horaria'],
  customerName: ['Customer', 'Cliente'],
  accessNotes: ['Access notes', 'Notas de acceso'],
  permittedFrom: ['Permitted from', 'Permitido desde'],
  permittedUntil: ['Permitted until', 'Permitido hasta'],
  permittedHours: ['Permitted hours', 'Horario permitido'],
  siteName: ['Site', 'Obra'],
  siteAddress: ['Site address', 'Dirección de la obra'],
  wantedOn: ['Wanted on', 'Fecha deseada'],
  orderedYd3: ['Yards ordered', 'Yardas pedidas'],
  thicknessIn: ['Thickness', 'Espesor'],
  dimensions: ['Dimensions', 'Medidas'],
  lengthFt: ['Length', 'Largo'],
  widthFt: ['Width', 'Ancho'],
  areaFt2: ['Area', 'Área'],
  finish: ['Finish', 'Acabado'],
  placingMethod: ['Placing method', 'Método de colocación'],
  mixName: ['Mix', 'Mezcla'],
  placingRateYd3PerHour: ['Yards per hour', 'Yardas por hora'],
  firstLoad: ['First truck', 'Primer camión'],
  notes: ['Notes', 'Notas'],
  jobRef: ['Job number', 'Número de obra'],
};
