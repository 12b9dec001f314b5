package linkworthy.study;

import java.util.List;
import linkworthy.input.Require;
import linkworthy.noise.BitErrors;
import linkworthy.noise.NoiseModel;
import linkworthy.noise.Severity;
import linkworthy.noise.Site;

/**
 * One impairment of a study at its severities.
 *
 * @param label how it is named in results: the model's id unless the study says otherwise; never
 *     {@link #CLEAN}
 * @param model the model with every parameter in force
 * @param site where it acts
 * @param axis key the severities are given by
 * @param severities values on that axis, in study order
 */
public record ImpairmentChoice(
    String label, NoiseModel model, Site site, String axis, List<Double> severities) {
  /** The label of the clean severity, which every study has. */
  public static final String CLEAN = "none";

  /**
   * @throws IllegalArgumentException if there is no severity or the label is blank or reserved
   */
  public ImpairmentChoice {
    Require.notBlank(label, "label");
    if (label.equals(CLEAN)) {
      throw new IllegalArgumentException("the label '" + CLEAN + "' is kept for clean pictures");
    }
    severities = List.copyOf(severities);
    if (severities.isEmpty()) {
      throw new IllegalArgumentException(axis + " has no values; accepted: at least one");
    }
  }

  /** Whether packets may arrive damaged and be used all the same. */
  boolean damagesPackets() {
    return site == Site.BITS && !isChecked();
  }

  /** Whether packets may fail to arrive. */
  boolean losesPackets() {
    return site == Site.PACKETS || (site == Site.BITS && isChecked());
  }

  private boolean isChecked() {
    return model.parameters().getOrDefault(BitErrors.FRAME_CHECK, 0.0) != 0;
  }

  /** The severities with their axis. */
  public List<Severity> levels() {
    return severities.stream().map(value -> new Severity(axis, value)).toList();
  }
}
