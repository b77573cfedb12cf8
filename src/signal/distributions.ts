/// <reference path="./untyped-packages.d.ts" />
/**
 * Quantiles and upper-tail probabilities of the usual distributions. A quantile takes the probability `p`
 * below it, between 0 and 1 (ends left out); a tail is the probability above `x`.
 */
import jStat from 'jstat';
import { WrongUse } from '../errors';

/**
 * Value that a standard normal variable stays below with probability `p`. @throws WrongUse for p outside 0..1
 */
export function normalQuantile(p: number): number {
  checkProbability(p);
  return jStat.normal.inv(p, 0, 1);
}

/** Probability that a standard normal variable exceeds `x`. */
export function normalTail(x: number): number {
  return jStat.erfc(x / Math.SQRT2) / 2;
}

/** Quantile of Student's t. @throws WrongUse for p outside 0..1 or degrees of freedom not above 0 */
export function studentTQuantile(p: number, degrees: number): number {
  checkProbability(p);
  checkDegrees(degrees);
  return jStat.studentt.inv(p, degrees);
}

/** Probability that Student's t exceeds `x`. @throws WrongUse for degrees of freedom not above 0 */
export function studentTTail(x: number, degrees: number): number {
  checkDegrees(degrees);
  const both = jStat.ibeta(degrees / (degrees + x * x), degrees / 2, 0.5);
  return x >= 0 ? both / 2 : 1 - both / 2;
}

/** Quantile of chi-square. @throws WrongUse for p outside 0..1 or degrees of freedom not above 0 */
export function chiSquareQuantile(p: number, degrees: number): number {
  checkProbability(p);
  checkDegrees(degrees);
  return jStat.chisquare.inv(p, degrees);
}

/** Probability that chi-square exceeds `x`. @throws WrongUse for degrees of freedom not above 0 */
export function chiSquareTail(x: number, degrees: number): number {
  checkDegrees(degrees);
  return x <= 0 ? 1 : 1 - jStat.chisquare.cdf(x, degrees);
}

/** Quantile of F. @throws WrongUse for p outside 0..1 or degrees of freedom not above 0 */
export function fQuantile(p: number, degrees1: number, degrees2: number): number {
  checkProbability(p);
  checkDegrees(degrees1);
  checkDegrees(degrees2);
  return jStat.centralF.inv(p, degrees1, degrees2);
}

/** Probability that F exceeds `x`. @throws WrongUse for degrees of freedom not above 0 */
export function fTail(x: number, degrees1: number, degrees2: number): number {
  checkDegrees(degrees1);
  checkDegrees(degrees2);
  return x <= 0 ? 1 : jStat.ibeta(degrees2 / (degrees2 + degrees1 * x), degrees2 / 2, degrees1 / 2);
}

function checkProbability(p: number): void {
  if (!(p > 0 && p < 1)) {
    throw new WrongUse(`A probability for a quantile lies between 0 and 1, ends left out. Received ${p}.`);
  }
}

function checkDegrees(degrees: number): void {
  if (!(degrees > 0)) throw new WrongUse(`Degrees of freedom are a number above 0. Received ${degrees}.`);
}
