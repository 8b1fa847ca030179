/** A share in words, without its sign: "4.3 %". */
export const percent = (share: number) => `${(100 * Math.abs(share)).toFixed(1)} %`;
