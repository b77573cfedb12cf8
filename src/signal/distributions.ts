/// <reference path="./untyped-packages.d.ts" />
/**
 * Quantiles of the usual distributions. A quantile takes the probability `p` below it, between 0 and 1 (ends left out).
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

/** Quantile of Student's t. @throws WrongUse for p outside 0..1 or degrees of freedom not above 0 */
export function studentTQuantile(p: number, degrees: number): number {
  checkProbability(p);
  checkDegrees(degrees);
  return jStat.studentt.inv(p, degrees);
}

/** Quantile of chi-square. @throws WrongUse for p outside 0..1 or degrees of freedom not above 0 */
export function chiSquareQuantile(p: number, degrees: number): number {
  checkProbability(p);
  checkDegrees(degrees);
  return jStat.chisquare.inv(p, degrees);
}

/** Quantile of F. @throws WrongUse for p outside 0..1 or degrees of freedom not above 0 */
export function fQuantile(p: number, degrees1: number, degrees2: number): number {
  checkProbability(p);
  checkDegrees(degrees1);
  checkDegrees(degrees2);
  return jStat.centralF.inv(p, degrees1, degrees2);
}

function checkProbability(p: number): void {
  if (!(p > 0 && p < 1)) {
    throw new WrongUse(`A probability for a quantile lies between 0 and 1, ends left out. Received ${p}.`);
  }
}

function checkDegrees(degrees: number): void {
  if (!(degrees > 0)) throw new WrongUse(`Degrees of freedom are a number above 0. Received ${degrees}.`);
}
