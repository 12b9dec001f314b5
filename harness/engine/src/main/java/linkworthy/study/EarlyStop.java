package linkworthy.study;

import linkworthy.input.Require;

/**
 * Enough replicates and no more: how many each picture has under a severity is decided by the
 * spread of its own PSNR.
 *
 * @param atLeast replicates of each picture and severity, from 2
 * @param atMost replicates of each picture and severity, from {@code atLeast} to {@link
 *     Study#MAX_REPLICATES}
 * @param halfWidthDb wanted half-width of the noise interval of a cell, in dB, above 0
 */
public record EarlyStop(int atLeast, int atMost, double halfWidthDb) {
  /**
   * @throws IllegalArgumentException if a number is outside its range
   */
  public EarlyStop {
    Require.inRange(atMost, 2, Study.MAX_REPLICATES, "at-most");
    Require.inRange(atLeast, 2, atMost, "at-least");
    Require.positive(halfWidthDb, "half-width-db");
  }
}
