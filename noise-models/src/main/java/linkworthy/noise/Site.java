package linkworthy.noise;

import java.util.Locale;

/** The place where an impairment hurts a picture. */
public enum Site {
  /** Before the encoder: the sensor, or a raw hop to a neighbouring node. */
  SAMPLES,
  /** The coded stream, whole packets erased. */
  PACKETS,
  /** The coded stream, bits flipped. */
  BITS;

  /** The word used in model files, studies and results. */
  public String id() {
    return name().toLowerCase(Locale.ROOT);
  }
}
