import type { Plan } from "../../plan/types.ts";
import { list } from "../../words/index.ts";

/** What the report will show and this does not, with the reason. */
export function withheld({ unitCalled }: Plan): { what: string; why: string }[] {
  const { many } = unitCalled;
  return [
    {
      what: "Every measure by variant, every difference and what it would decide",
      why: "Looking at a result before the planned end, and stopping when it pleases, makes false results more frequent than stated.",
    },
    {
      what: `Whether rejected rows, rows that came twice and ${many} seen in two variants differ by variant`,
      why: `They grow with what ${many} do, so a difference between the groups gives an effect away. The figures for all together are here.`,
    },
    {
      what: `Whether the ${many} left out for want of a value differ by variant, and whether denominators do`,
      why: "Who has a value, and how large a denominator is, are outcomes themselves.",
    },
    {
      what: "How good the normal approximation is, and how much one single value weighs",
      why: "Both are judged on the difference between the groups.",
    },
    {
      what: `What is here by variant: ${list([
        `how many ${many} were enrolled, left and counted`,
        `what was known of them before enrolment`,
      ])}`,
      why: `Without it nobody could see that ${many} are not given the variants as planned, which must be mended early. A filter that looks past enrolment can be moved by the variant; the check of filters says which does.`,
    },
  ];
}
