import type { Words } from './words.ts';

/** Spanish sentences, in the words of US crews. */
export const wordsEs: Words = {
  weekdays: ['lunes', 'martes', 'miércoles', 'jueves', 'viernes', 'sábado', 'domingo'],
  months: [
    'enero',
    'febrero',
    'marzo',
    'abril',
    'mayo',
    'junio',
    'julio',
    'agosto',
    'septiembre',
    'octubre',
    'noviembre',
    'diciembre',
  ],
  longDay: (weekday, dayOfMonth, month) => `${weekday} ${dayOfMonth} de ${month}`,
  timeOnDay: (time, day) => `${time} ${day}`,
  timeInZone: (time, zoneName) => `${time} ${zoneName}`,
  finishes: {
    float: 'flotado',
    broom: 'escobillado',
    trowel: 'allanado',
    'hard-trowel': 'pulido',
    exposed: 'agregado expuesto',
    stamped: 'estampado',
  },
  withFinish: (finish) => `acabado ${finish}`,

  smsOpening: {
    assigned: (company, day) => `${company}: ${day}.`,
    offered: (company, day) => `${company} le ofrece trabajo ${day}.`,
    changed: (company, day) => `${company}: cambio para ${day}.`,
  },
  smsEnding: {
    'called-off': (company, { day, start, place }) =>
      `${company}: CANCELADO. ${day}, ${start}, ${place}. No venga.`,
    'put-off': (company, { day, start, place }) =>
      `${company}: aplazado. ${day}, ${start}, ${place}. No venga entonces; aún no hay nuevo día.`,
    'taken-off': (company, { day, start, place }) =>
      `${company}: ya no está en el trabajo ${day}, ${start}, ${place}. No venga a ese.`,
  },
  beThere: (time) => `Entrada ${time}`,
  firstTruck: (time) => `primer camión ${time}`,
  howToAnswer: (link) => `Conteste SÍ o NO, o toque ${link}`,
  howToAnswerOrStop: (link) => `Conteste SÍ o NO (STOP para no recibir más), o toque ${link}`,

  dayMoved: ({ from, to }) => `El día pasa de ${from} a ${to}`,
  startMoved: ({ from, to }) => `La entrada pasa de ${from} a ${to}`,
  firstTruckMoved: ({ from, to }) => `El primer camión pasa de ${from} a ${to}`,
  firstTruckNow: (time) => `El primer camión ahora ${time}`,
  firstTruckGone: () => 'El primer camión aún no tiene hora',
  placeChanged: ({ from, to }) => `La dirección ahora es ${to}, no ${from}`,
  amountChanged: ({ from, to }) => `Ahora ${to}, no ${from}`,
  finishChanged: ({ from, to }) => `El acabado ahora es ${to}, no ${from}`,
  workChanged: ({ from, to }) => `El trabajo ahora es ${to}, no ${from}`,

  mailSubject: {
    assigned: (company, { day, start, place }) => `${day}, ${start}: ${place} (${company})`,
    offered: (company, { day, start, place }) => `Oferta de trabajo ${day}, ${start}: ${place} (${company})`,
    changed: (company, { day, start, place }) => `Cambio: ${day}, ${start}, ${place} (${company})`,
    'called-off': (company, { day, start, place }) => `Cancelado: ${day}, ${start}, ${place} (${company})`,
    'put-off': (company, { day, start, place }) => `Aplazado: ${day}, ${start}, ${place} (${company})`,
    'taken-off': (company, { day, start, place }) =>
      `Ya no está en este trabajo: ${day}, ${start}, ${place} (${company})`,
  },
  mailOpening: {
    assigned: (company) => `${company} cuenta con usted para este trabajo.`,
    offered: (company) => `${company} le ofrece este trabajo. Es suyo cuando diga que sí.`,
    changed: (company) => `${company} cambió un trabajo del que ya se le avisó.`,
    'called-off': (company) => `${company} canceló este trabajo. No venga.`,
    'put-off': (company) => `${company} aplazó este trabajo. No venga entonces; aún no hay nuevo día.`,
    'taken-off': (company) => `${company} ya no cuenta con usted para este trabajo. No venga a él.`,
  },
  greeting: (name) => `Hola, ${name}:`,
  mailLabels: {
    day: 'Día',
    start: 'Entrada',
    firstLoad: 'Primer camión',
    place: 'Dónde',
    concrete: 'Concreto',
    work: 'Trabajo',
    changes: 'Qué cambió',
  },
  mailAnswer: (link) => `Diga sí o no aquí: ${link}`,
  safety:
    'Seguridad: el concreto fresco quema la piel y los ojos. Use guantes y botas impermeables, manga larga y protección para los ojos. Enjuague la piel enseguida con agua limpia; enjuague los ojos 15 minutos y vaya al médico.',
  localCode:
    'Las horas y cantidades son un plan. Primero van los códigos de construcción, los permisos, las horas de ruido y las reglas de la obra: revise lo que rige donde trabaja.',

  replies: {
    yes: (company, { day, start, place }) => `Gracias. ${company} tiene su SÍ: ${day}, ${start}, ${place}.`,
    no: (company, { day, start, place }) => `${company} tiene su NO: ${day}, ${start}, ${place}.`,
    notFree: (company, { day, start }) =>
      `${company}: usted no está libre ${day}, ${start}, así que su SÍ no se tomó. Llame a la oficina.`,
    notAsked: (company, { day, start }) =>
      `${company}: ya no se le pide para ${day}, ${start}. No se cambió nada.`,
    unclear: (company, { day, start, place }) =>
      `${company}: conteste SÍ o NO para ${day}, ${start}, ${place}. Para otra cosa llame a la oficina.`,
    nothingAsked: 'No hay trabajo que espere su respuesta. Llame a la oficina de su compañía.',
    help: 'Horas de trabajo para cuadrillas de concreto, de su compañía. Conteste SÍ o NO al último. Mande STOP para no recibir más mensajes.',
    stopped:
      'Ya no llegarán mensajes a este número, de ninguna compañía. Mande START para recibirlos otra vez.',
    started: 'Otra vez llegarán a este número los mensajes de su trabajo. Mande STOP para no recibirlos.',
  },

  deliveryProblems: {
    'bad-address': 'El número o la dirección no existe o no recibe mensajes.',
    'not-a-mobile': 'El número no es de celular; ningún mensaje de texto le llega.',
    'said-stop': 'Esta persona mandó STOP. Llámele.',
    unreachable: 'El teléfono estuvo apagado o sin señal demasiado tiempo.',
    filtered: 'La compañía telefónica rechazó el mensaje.',
    'not-allowed-there': 'La cuenta no puede mandar mensajes a ese país.',
    'sender-set-up': 'La cuenta o el número de origen no está bien configurado.',
    'try-later': 'El servicio estaba ocupado o no respondió; se intenta otra vez.',
    'gave-up': 'No se pudo llegar al servicio por más de una hora; no se mandó.',
    interrupted: 'El envío se interrumpió. Puede haber llegado o no: pregunte antes de mandarlo otra vez.',
    'no-answer': 'El servicio no respondió. Puede haber llegado o no: pregunte antes de mandarlo otra vez.',
    superseded: 'Un mensaje más nuevo tomó su lugar antes de mandarse.',
    'no-link': 'No se pudo hacer el enlace para contestar; no se mandó.',
    other: 'Fue rechazado.',
  },
};
