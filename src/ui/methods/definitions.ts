import { percentileWords } from "./percentile-words";
import { DEFAULT_QUEUE_OPTIONS as QUEUE } from "@/core/queues/options";
import { LEAST_FOR_MEDIAN, LEAST_FOR_P95 } from "@/core/scores/delay-level";
import { DEFAULT_SCORE_OPTIONS } from "@/core/scores/score-screen";
import { CROSSING } from "@/core/traversals/extract";
import { REFERENCE } from "@/core/traversals/references";
import { STOPPING } from "@/core/traversals/stops";
import { CLEANING } from "@/core/options";

export interface Definition {
  id: string;
  term: string;
  meaning: string[];
  formula?: string;
  source?: string;
}

const kmh = (speedMs: number) => Math.round(speedMs * 3.6);

/** Engineers look at single movements, where a hint is better than nothing; everybody else is shown what the sample supports. */
export const NO_EVIDENCE_RULE =
  "Without evidence a junction has no figure anywhere. For its legs and movements the junction page and the strip still show delay and reach, marked with evidence “none”: they are not ranked, get no level of service, and stand in no list, on no map, in no export of the list and in no report.";

/** What each figure is, in the order in which one is made from the other. Numbers are read from the core itself. */
export const DEFINITIONS: readonly Definition[] = [
  {
    id: "traversal",
    term: "Traversal",
    meaning: [
      `One vehicle passing one junction: from the cordon ${CROSSING.cordonUpM} m before the stop line, or the upstream junction where that is nearer, to ${CROSSING.cordonDownM} m past the junction, never beyond half-way to the next.`,
      `Pings of a vehicle are put in order; steps that imply more than ${kmh(CLEANING.maxSpeedMs)} km/h are dropped; a silence of more than ${CLEANING.maxGapS} s ends a trip. Each trip is matched as a whole to the most likely path over legs and links that were learned from all pings, without an outside street map; a step that led over streets which are not known breaks the path. A trip that begins or ends at the junction, or leaves the street before it, is counted but not scored.`,
      `Times at cordon, stop line and exit are interpolated along the path; the stop line is judged ${CROSSING.virtualLineM} m past it, where nobody stands.`,
    ],
    source: "Hidden Markov map matching: Newson and Krumm, ACM SIGSPATIAL GIS 2009. Monotone interpolation: Fritsch and Carlson, SIAM Journal on Numerical Analysis 17, 1980.",
  },
  {
    id: "turn",
    term: "Turning movement",
    meaning: ["A leg and an exit of the same junction. The exit that lies straightest ahead, within 50 degrees, is through; 150 degrees and more is a U-turn; the others are left or right by the sign of the angle. The directions of leg and exit are the mean headings of the vehicles there, on the first 40 m beyond the stop line."],
  },
  {
    id: "delay",
    term: "Control delay",
    meaning: [
      "How much longer the traversal took than an undelayed vehicle of the same movement needs. Single delays may be negative and are not cut off at zero, so that the mean is not pushed up. A mean below zero says that vehicles were quicker than the reference, and is shown as it is, on pages and in exports.",
      `The reference is built from the leg’s free speed and the geometry of the turn, then moved by what unhindered traversals of that movement show: their ${percentileWords(REFERENCE.share)}, drawn towards leg and kind of turn where few were seen. From ${REFERENCE.seenN} unhindered traversals on it counts as seen, below as shrunk, with none as free speed; the junction page says which.`,
    ],
    formula: "delay = (t exit − t cordon) − reference",
    source: "Control delay: Highway Capacity Manual, 7th edition, chapter 19. Quantile p(n + 1): Hyndman and Fan, The American Statistician 50, 1996, type 6.",
  },
  {
    id: "percentiles",
    term: "Mean, median, 95th percentile",
    meaning: [`Over all traversals of the chosen days and hours. The median needs ${LEAST_FOR_MEDIAN} traversals, the 95th percentile ${LEAST_FOR_P95}.`],
    source: "Linear interpolation: Hyndman and Fan 1996, type 7.",
  },
  {
    id: "stops",
    term: "Stops",
    meaning: [
      `A stop begins below ${kmh(STOPPING.stopMs)} km/h and ends above ${kmh(STOPPING.goMs)} km/h. Where pings are more than ${STOPPING.hiddenFromS} s apart, a stop between two of them is inferred when the step took longer than braking at ${STOPPING.brakeMs2} m/s² to a stand and speeding up at ${STOPPING.speedUpMs2} m/s² would.`,
    ],
  },
  {
    id: "reach",
    term: "Reach, observed",
    meaning: [
      `How far back from the stop line the tail of the queue stood. Vehicles that stand form one column as long as the first is within ${QUEUE.headM} m of the stop line, each next one within ${QUEUE.gapM} m of the last (within less, down to ${QUEUE.headAllM} and ${QUEUE.gapAllM} m, where much of the traffic is seen), and they stood within ${QUEUE.memoryS} s of each other. Who stood for ${QUEUE.queuingS} s and moved up meanwhile belongs to it, whoever else was seen. Vehicles whose pings end in the queue count with the stops after which they drove on. Vehicles that wait inside the junction behind are not this leg’s queue.`,
      "The figure is the 95th percentile of the farthest reach in each quarter of an hour. With a few per cent of the vehicles seen, the last one seen is seldom the last one: the true tail stands farther back.",
    ],
  },
  {
    id: "reach-estimate",
    term: "Reach, estimated",
    meaning: [
      "A model, shown beside the observed reach and never in its place: where the unseen end of the queue is expected, from the rate at which seen vehicles arrive and how closely they stand, until the discharge has run back to it. For the farthest of a quarter one standard deviation of the vehicles joined is added, for two lanes.",
    ],
    formula: "vehicles behind the last one seen = (1 − p) · λ · τ",
    source: "Comert and Cetin, European Journal of Operational Research 197, 2009.",
  },
  {
    id: "spillback",
    term: "Spillback",
    meaning: [
      `Share of the time for which the sample can speak about the leg in which its queue fills ${QUEUE.spillShare * 100} % or more of the storage length, the distance to the junction behind. Where the unseen end of the queue is expected counts with it: a model. A vehicle’s place is taken to be good to ${QUEUE.doubtM.toFixed(1)} m, except where it moved up in the queue and stood again. A vehicle speaks for the leg while it is on it and ${QUEUE.sightS} s before and after; one that had to stand again, only until it drives off. Legs shorter than ${QUEUE.leastStorageM.toFixed(0)} m, room for three vehicles, have no share.`,
    ],
    formula: "queue storage ratio = reach / storage length",
    source: "Queue storage ratio: Highway Capacity Manual, 7th edition, chapter 31.",
  },
  {
    id: "strip",
    term: "Strip",
    meaning: [
      "Speed in a cell of time and distance is the distance travelled in it divided by the time spent in it, by all vehicles. Cells are rectangles, or lean along the wave that runs back through a queue. Smoothing follows the two directions in which traffic carries a change, and leaves a cell empty where no vehicle was near.",
      "On a simulated network of signalised legs with every vehicle seen, travel times read off cells of 10 m by 10 s were off by 3.5 to 3.8 % along waves of 10, 15 and 20 km/h, by 5.3 % with rectangles of the same area, so cells along the wave are the default and the speed of the wave matters little. With one vehicle in ten seen, all shapes were off by about 25 %: there the sample decides, not the shape.",
    ],
    formula: "v = Σ distance / Σ time",
    source: "Edie, Proceedings of the 2nd International Symposium on the Theory of Traffic Flow, 1963. Adaptive smoothing: Treiber and Helbing 2002; Treiber, Kesting and Wilson 2011.",
  },
  {
    id: "interval",
    term: "95 % interval",
    meaning: [
      "Vehicles of one day, one queue and one quarter of an hour are not independent, and the interval of a mean allows for it: the spread of single delays, how much vehicles of the same cluster resemble each other, and the spread between the days are combined, each drawn towards that of similar movements where few were seen. With fewer than three days, neighbouring quarters of an hour stand in for days.",
      "Shares (stopping, spillback) have Wilson’s interval.",
    ],
    source: "Design effect: Kish, Survey Sampling, 1965. Moderated variances: Smyth, Statistical Applications in Genetics and Molecular Biology 3, 2004. Wilson, JASA 22, 1927. Quantiles: Woodruff, JASA 47, 1952.",
  },
  {
    id: "rank",
    term: "Rank, and where it could be",
    meaning: [
      "Junctions are ranked by mean delay after shrinkage: a mean that rests on few vehicles is drawn towards the city’s, by ratio rather than by seconds (on log(delay + 10 s)), so that five unlucky vehicles do not top the list and a well observed bad junction keeps its place. Equal values share the better rank. Filters choose among the junctions and never change a rank.",
      `Its interval comes from ${DEFAULT_SCORE_OPTIONS.rankDraws.toLocaleString("en-GB")} seeded draws of all junctions at once. Where two spans overlap, the sample does not settle which junction is worse.`,
    ],
    source: "Empirical Bayes with the variance of DerSimonian and Laird, Controlled Clinical Trials 7, 1986. Rank intervals: Goldstein and Spiegelhalter, JRSS A 159, 1996.",
  },
  {
    id: "hours",
    term: "Hours of delay seen",
    meaning: ["Mean delay times the vehicles seen. It is not the delay of all traffic: for that, the share of vehicles in the sample would have to be known."],
    formula: "hours = vehicles seen · mean delay / 3600",
  },
];
