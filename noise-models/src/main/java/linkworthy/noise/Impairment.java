package linkworthy.noise;

import java.util.BitSet;
import linkworthy.corpus.Picture;
import org.apache.commons.rng.UniformRandomProvider;

/** A model at one severity, resolved for one clean picture and ready to be drawn. */
public sealed interface Impairment {
  /**
   * The mean squared error that the impairment alone is expected to cause to the raw, uncoded
   * picture whose receiver shows the picture mean where samples are missing; grey levels squared.
   */
  double equivalentNoiseVariance();

  /** An impairment of the samples, before the encoder. */
  non-sealed interface OnSamples extends Impairment {
    /** The picture as the encoder sees it: same size and depth. */
    Picture apply(Picture clean, UniformRandomProvider random);
  }

  /** An impairment that erases packets. */
  non-sealed interface OnPackets extends Impairment {
    /** Opens one realisation; packet {@code i} of every codec meets the same fate. */
    Losses losses(UniformRandomProvider random);
  }

  /** An impairment that takes whole nodes, and with each all packets it sends. */
  non-sealed interface OnNodes extends Impairment {
    /** Opens one realisation; index i is node i: 0 the camera, from 1 its helpers. */
    Losses failures(UniformRandomProvider random);
  }

  /** An impairment that flips bits of packets. */
  non-sealed interface OnBits extends Impairment {
    /**
     * Bits of the check by which a receiver drops each frame that fails it: 16 or 32, or 0 if there
     * is none and damaged packets reach the decoder.
     */
    int checkBits();

    /** Opens one realisation. */
    Errors errors(UniformRandomProvider random);
  }

  /**
   * One realisation of bit errors. Reading is by index and in any order; the errors of packet i
   * depend on the random stream and on i alone, not on the number or the lengths of other packets,
   * and those of a shorter packet are the first ones of a longer packet. Not safe for use by
   * several threads.
   */
  interface Errors {
    /**
     * The flipped bits among the first {@code bits} of packet {@code index} (from 0), counted in
     * sending order.
     */
    BitSet flipped(int index, int bits);
  }

  /**
   * One realisation of packet losses. Reading is by index and in any order; the fate of packet i
   * depends on the random stream alone, not on who asks. Not safe for use by several threads.
   */
  interface Losses {
    /** Whether packet {@code index} (from 0) is lost. */
    boolean lost(int index);
  }
}
