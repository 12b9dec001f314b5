package linkworthy.study;

import java.util.LinkedHashMap;
import java.util.Map;
import linkworthy.codec.Codec;
import linkworthy.codec.Training;
import linkworthy.input.Require;
import linkworthy.link.Protection;

/**
 * One option of a study: a codec and how its packets are protected.
 *
 * @param label how it is named in results
 * @param codec with room in its packets for what the protection writes into them
 * @param protection of its packets
 */
public record CodecChoice(String label, Codec codec, Protection protection) {
  private static final String LABEL = "label";
  private static final String PROTECT = "protect";

  /**
   * @throws IllegalArgumentException if the label is blank
   */
  public CodecChoice {
    Require.notBlank(label, LABEL);
  }

  /** The option under the codec's label followed by the protection's. */
  public static CodecChoice of(Codec codec, Protection protection) {
    return new CodecChoice((codec.label() + " " + protection.label()).strip(), codec, protection);
  }

  /** The same option with its codec trained. */
  public CodecChoice trainedOn(Training training) {
    return new CodecChoice(label, codec.trainedOn(training), protection);
  }

  /** The codec's settings, {@code protect} and {@code label}, as a study file writes them. */
  public Map<String, Object> settings() {
    Map<String, Object> settings = new LinkedHashMap<>(codec.settings());
    settings.remove(LABEL);
    settings.put(PROTECT, protection.settings());
    settings.put(LABEL, label);
    return settings;
  }

  /**
   * What decides the numbers: the settings without the name, and without {@code protect} where
   * there is no protection, so that options from before there was any keep their identity.
   */
  public Map<String, Object> identity() {
    Map<String, Object> identity = settings();
    identity.remove(LABEL);
    if (protection.isNone()) {
      identity.remove(PROTECT);
    }
    return identity;
  }
}
