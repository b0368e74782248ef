/** A share as a percentile in words: 0.2 is "20th percentile". */
export function percentileWords(share: number): string {
  const percent = Math.round(share * 100);
  const last = percent % 10;
  const isTeen = percent % 100 >= 11 && percent % 100 <= 13;
  const ending = isTeen ? "th" : last === 1 ? "st" : last === 2 ? "nd" : last === 3 ? "rd" : "th";
  return `${percent}${ending} percentile`;
}
