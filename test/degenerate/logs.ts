/** Logs at the edge of what can be computed, each with its plan. */
export interface EdgeLog {
  readonly name: string;
  readonly plan: string;
  readonly files: Readonly<Record<string, string>>;
}

interface PlanParts {
  readonly metrics: readonly string[];
  readonly rest?: string;
  readonly variants?: string;
  readonly columns?: string;
}

export const BOOKED =
  "{name: Booked, role: primary, summary: proportion, of: {event: booking}, worthwhile: {relative: 5%}}";
export const FARE = "{name: Fare, role: primary, summary: mean, of: {event: booking, sum: fare}, in: kr}";
export const RATIO =
  "{name: Bookings per search, role: primary, summary: ratio-of-totals, of: {event: booking}, per: {event: search}}";
export const CONTACTS =
  "{name: Contacts, role: guardrail, summary: mean, of: {event: contact}, good-is: lower, margin: {relative: 10%}}";

export function plan({ metrics, rest = "", variants, columns }: PlanParts): string {
  return `experiment: Fare calendar
question: Does a month of fares at a glance raise bookings?
unit-called: {one: visitor, many: visitors}
log:
  - files: log.csv
    columns: ${columns ?? "{unit: visitor, time: at, event: event, variant: arm}"}
enrolment: {event: search}
variants: ${variants ?? "[{name: list, control: true}, {name: calendar}]"}
metrics:
${metrics.map((metric) => `  - ${metric}`).join("\n")}
${rest}`;
}

export const HEADER = "visitor,at,event,arm,fare";

/** Visitors of one variant who search, and the first so many of them book, at these fares in turn. */
export function visitors(arm: string, units: number, bookings = 0, fares: readonly string[] = ["100"]): string[] {
  return Array.from({ length: units }, (_, i) => `${arm}-${i}`).flatMap((visitor, i) => [
    `${visitor},2026-03-02T10:00,search,${arm},`,
    ...(i < bookings ? [`${visitor},2026-03-02T11:00,booking,,${fares[i % fares.length]}`] : []),
  ]);
}

const log = (...rows: readonly (readonly string[])[]) => ({ "log.csv": `${[HEADER, ...rows.flat()].join("\n")}\n` });
const edge = (name: string, plan: string, files: Readonly<Record<string, string>>): EdgeLog => ({ name, plan, files });
const ALL = plan({ metrics: [BOOKED, FARE.replace("primary", "secondary"), CONTACTS] });

/** Each ends in a report, whatever can be said in it. */
export const EDGE_LOGS: readonly EdgeLog[] = [
  edge("nobody enrolled", ALL, log(["v1,2026-03-02,booking,,10", "v2,2026-03-02,page,list,"])),
  edge("one variant only", ALL, log(visitors("list", 20, 5))),
  edge("the other variant only", ALL, log(visitors("calendar", 20, 5))),
  edge("variants that the plan lacks only", ALL, log(visitors("map", 20, 5))),
  edge("an arm of one", ALL, log(visitors("list", 20, 5), visitors("calendar", 1, 1))),
  edge("one in each arm", ALL, log(visitors("list", 1, 0), visitors("calendar", 1, 1))),
  edge("three in each arm", ALL, log(visitors("list", 3, 1), visitors("calendar", 3, 2))),
  edge(
    "three in each arm who pay",
    plan({ metrics: [FARE] }),
    log(visitors("list", 3, 3, ["10", "20", "30"]), visitors("calendar", 3, 3, ["20", "30", "45"])),
  ),
  edge(
    "no spread in one arm",
    plan({ metrics: [FARE] }),
    log(visitors("list", 300, 300), visitors("calendar", 300, 300, ["90", "110"])),
  ),
  edge(
    "no spread in the other arm",
    plan({ metrics: [FARE] }),
    log(visitors("list", 300, 300, ["90", "110"]), visitors("calendar", 300, 300)),
  ),
  edge(
    "no spread at all, alike",
    plan({ metrics: [FARE] }),
    log(visitors("list", 300, 300), visitors("calendar", 300, 300)),
  ),
  edge(
    "no spread at all, apart",
    plan({ metrics: [FARE] }),
    log(visitors("list", 300, 300), visitors("calendar", 300, 300, ["110"])),
  ),
  edge(
    "a control mean of 0",
    plan({ metrics: [FARE] }),
    log(visitors("list", 300, 300, ["-10", "10"]), visitors("calendar", 300, 300, ["9", "11"])),
  ),
  edge(
    "a control without any value but 0",
    plan({ metrics: [FARE] }),
    log(visitors("list", 300, 0), visitors("calendar", 300, 60)),
  ),
  edge(
    "no counted rows",
    plan({ metrics: [BOOKED, FARE.replace("primary", "secondary")] }),
    log(visitors("list", 300), visitors("calendar", 300)),
  ),
  edge("none against none", plan({ metrics: [BOOKED] }), log(visitors("list", 40, 0), visitors("calendar", 50, 0))),
  edge("none against all", plan({ metrics: [BOOKED] }), log(visitors("list", 40, 0), visitors("calendar", 50, 50))),
  edge("all against all", plan({ metrics: [BOOKED] }), log(visitors("list", 40, 40), visitors("calendar", 50, 50))),
  edge(
    "nobody left by a filter",
    plan({ metrics: [BOOKED], rest: "filters: [{name: all, drop: units, where: {visitor: {missing: false}}}]" }),
    log(visitors("list", 40, 5), visitors("calendar", 50, 5)),
  ),
  edge(
    "nobody followed to the end",
    plan({ metrics: [BOOKED], rest: "follow-up: {days: 30}" }),
    log(visitors("list", 40, 5), visitors("calendar", 50, 5)),
  ),
  edge(
    "a ratio without a denominator",
    plan({ metrics: [RATIO.replace("per: {event: search}", "per: {event: page}")] }),
    log(visitors("list", 300, 50), visitors("calendar", 300, 60)),
  ),
  edge(
    "a ratio whose denominator lacks in one arm",
    plan({ metrics: [RATIO.replace("per: {event: search}", "per: {event: page}")] }),
    log(visitors("list", 300, 50), visitors("calendar", 300, 60), ["calendar-1,2026-03-03,page,,"]),
  ),
  edge(
    "a ratio without a numerator",
    plan({ metrics: [RATIO] }),
    log(visitors("list", 300), visitors("calendar", 300)),
  ),
  edge(
    "nobody with a value",
    plan({
      metrics: [BOOKED, "{name: Dearest, summary: mean, of: {event: booking, max: fare}, without-rows: leave-out}"],
    }),
    log(visitors("list", 300), visitors("calendar", 300)),
  ),
  edge(
    "one visitor in an arm with a value",
    plan({
      metrics: [BOOKED, "{name: Dearest, summary: mean, of: {event: booking, max: fare}, without-rows: leave-out}"],
    }),
    log(visitors("list", 300, 100, ["5", "6"]), visitors("calendar", 300, 1)),
  ),
  edge(
    "the largest numbers there are",
    plan({ metrics: [FARE] }),
    log(
      visitors("list", 300, 300, ["999999999999999999.999999999", "-999999999999999999.999999999"]),
      visitors("calendar", 300, 300, ["999999999999999999.999999999"]),
    ),
  ),
  edge(
    "the smallest numbers there are",
    plan({ metrics: [FARE] }),
    log(
      visitors("list", 300, 300, ["0.000000001", "0.000000002"]),
      visitors("calendar", 300, 300, ["0.000000001", "0.000000003"]),
    ),
  ),
  edge(
    "three variants of which one has nobody",
    plan({ metrics: [BOOKED], variants: "[{name: list, control: true}, {name: calendar}, {name: map}]" }),
    log(visitors("list", 300, 50), visitors("calendar", 300, 60)),
  ),
  edge(
    "a table without times",
    plan({
      metrics: ["{name: Hired, role: primary, summary: proportion, of: {where: {fare: 1}}}"],
      columns: "{unit: visitor, variant: arm}",
    }).replace("enrolment: {event: search}\n", ""),
    log(["a,,,list,1", "b,,,list,0", "c,,,calendar,1", "d,,,calendar,1"]),
  ),
];
