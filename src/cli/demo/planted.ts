/**
 * What is true of the invented ferry line, before chance: the log is one draw from these figures, so a report's intervals
 * should hold them 19 times in 20. Per-visitor figures are of the seven days from a visitor's enrolment.
 */
export type Arm = "list" | "calendar";

export interface Planted {
  /** Share of visitors with a booking. */
  readonly bookedShare: number;
  /** Bookings of a visitor who books at all. */
  readonly bookingsPerBooker: number;
  /** Mean fare of a booking, kr, before any cap. */
  readonly farePerBooking: number;
  /** Openings of the search page per visitor, the enrolling one included. */
  readonly searchesPerVisitor: number;
  /** Support contacts per visitor. */
  readonly contactsPerVisitor: number;
  /** Mean seconds until the search page shows. */
  readonly secondsPerSearch: number;
}

/** How often each kind of visitor books with the list, and how many bookings it has made in the past. */
export interface Kind {
  readonly booksWithList: number;
  readonly pastBookings: number;
}
export const KINDS: readonly (readonly [Kind, number])[] = [
  [{ booksWithList: 0.2, pastBookings: 0.12 }, 0.6], // on holiday
  [{ booksWithList: 0.42, pastBookings: 0.5 }, 0.3], // has a cabin on the islands
  [{ booksWithList: 0.54, pastBookings: 1.2 }, 0.1], // lives there
];

/** The calendar's effects; each multiplies the list's figure. */
export const EFFECTS = { booked: 1.1, fare: 0.98, contacts: 0.97, seconds: 1.015 } as const;

export const EXTRA_BOOKINGS = 0.25;

/** Fares are lognormal: a visitor's own level, then the booking; a few are coach parties, which make the tail heavy. */
export const FARES = {
  median: 480,
  visitorSd: 0.5,
  bookingSd: 0.35,
  party: { share: 0.006, median: 5000, sd: 0.9 },
} as const;

/** Seconds are lognormal: a visitor's own connection, then the single opening. */
export const SECONDS = { mean: 1.8, visitorSd: 0.35, openingSd: 0.3 } as const;

/** Most visitors need no support; those who do call 1 + Poisson(extra) times. */
export const CONTACTS = { share: 0.09, extra: 1 / 3 } as const;

/** Visits after the enrolling one: how many, how long after it (exponential, days), and what happens in each. */
export const VISITS = { extra: 1.1, meanDelayDays: 2.5, searchesFirst: 0.4, searchesLater: 0.7 } as const;

export const FOLLOW_UP_DAYS = 7;

/** A mean of exp(sd Z) times the median is median exp(sd^2 / 2). */
function lognormalMean(median: number, ...sds: readonly number[]): number {
  return median * Math.exp(sds.reduce((sum, sd) => sum + sd * sd, 0) / 2);
}

function planted(arm: Arm): Planted {
  const times = (effect: number) => (arm === "calendar" ? effect : 1);
  const { party } = FARES;
  const alone = lognormalMean(FARES.median, FARES.visitorSd, FARES.bookingSd);
  // An exponential delay is shorter than the follow-up with probability 1 - exp(-days / mean).
  const seen = 1 - Math.exp(-FOLLOW_UP_DAYS / VISITS.meanDelayDays);
  return {
    bookedShare: KINDS.reduce((sum, [kind, share]) => sum + share * kind.booksWithList, 0) * times(EFFECTS.booked),
    bookingsPerBooker: 1 + EXTRA_BOOKINGS,
    farePerBooking:
      ((1 - party.share) * alone + party.share * lognormalMean(party.median, party.sd)) * times(EFFECTS.fare),
    searchesPerVisitor: 1 + VISITS.searchesFirst + VISITS.extra * seen * VISITS.searchesLater,
    contactsPerVisitor: CONTACTS.share * (1 + CONTACTS.extra) * times(EFFECTS.contacts),
    secondsPerSearch: SECONDS.mean * times(EFFECTS.seconds),
  };
}

/** The planted truth by variant: what tests hold a report against. */
export const PLANTED: Readonly<Record<Arm, Planted>> = { list: planted("list"), calendar: planted("calendar") };
