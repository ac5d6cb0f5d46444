/**
 * The closed lists of the trade's words. Screens, code, messages and the database's check constraints all
 * derive from these; the types derive from the lists.
 */

export const roles = ['owner', 'dispatcher', 'foreman', 'finisher', 'sub'] as const;
/** A member's seat in a company. */
export type Role = (typeof roles)[number];

export const visitKinds = ['prep', 'pour', 'saw', 'strip', 'protect', 'seal', 'other'] as const;
/** What a crew does at a site in one block of time. Only `pour` has a chain. */
export type VisitKind = (typeof visitKinds)[number];

export const visitStates = ['waiting', 'pencilled', 'firm', 'done', 'called-off'] as const;
/** `waiting`: not on the board; `pencilled`: on it, told to nobody; `firm`: told once settled. */
export type VisitState = (typeof visitStates)[number];

export const finishes = ['float', 'broom', 'trowel', 'hard-trowel', 'exposed', 'stamped'] as const;
export type Finish = (typeof finishes)[number];

export const placingMethods = ['chute', 'buggy', 'line-pump', 'boom-pump'] as const;
export type PlacingMethod = (typeof placingMethods)[number];

export const jointings = ['saw-conventional', 'saw-early-entry', 'tooled', 'none'] as const;
/** How contraction joints are made; the two sawn ways cause a `saw` follow-up. */
export type Jointing = (typeof jointings)[number];

export const cements = ['type-i', 'type-ii', 'type-iii'] as const;
export type Cement = (typeof cements)[number];

export const cureUses = ['foot', 'forms', 'light-vehicle', 'full-load', 'adjacent-pour'] as const;
/** A use that a slab must not carry before its cure blackout has ended. */
export type CureUse = (typeof cureUses)[number];

export const orderStates = ['drafted', 'sent', 'confirmed', 'countered', 'refused', 'called-off'] as const;
/** State of a mix order or of an equipment booking. The last two hold nothing. */
export type OrderState = (typeof orderStates)[number];

export const offerStates = ['open', 'accepted', 'declined', 'lapsed', 'withdrawn'] as const;
export type OfferState = (typeof offerStates)[number];

export const shiftStates = ['held', 'released'] as const;
/** `held`: the person's time is taken. `released`: it no longer is (moved away, or the person said no). */
export type ShiftState = (typeof shiftStates)[number];

export const answers = ['none', 'yes', 'no'] as const;
/** A person's answer to what they were last told. */
export type Answer = (typeof answers)[number];

export const equipmentKinds = ['pump', 'laser-screed', 'ride-on-trowel', 'saw', 'blankets', 'other'] as const;
export type EquipmentKind = (typeof equipmentKinds)[number];

export const sectionShapes = ['rectangle', 'polygon', 'circle', 'strip'] as const;
export type SectionShape = (typeof sectionShapes)[number];

export const channels = ['sms', 'email'] as const;
export type Channel = (typeof channels)[number];

export const noticeStates = ['queued', 'sending', 'sent', 'delivered', 'failed', 'unsure'] as const;
/** `unsure`: the provider was called and no answer came, so a person decides whether to send again. */
export type NoticeState = (typeof noticeStates)[number];

export const languages = ['en', 'es'] as const;
export type Language = (typeof languages)[number];
