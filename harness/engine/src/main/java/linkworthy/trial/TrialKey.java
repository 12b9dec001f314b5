package linkworthy.trial;

import java.nio.charset.StandardCharsets;
import java.security.MessageDigest;
import java.security.NoSuchAlgorithmException;
import java.util.HexFormat;
import linkworthy.study.CodecChoice;
import linkworthy.study.ImpairmentChoice;
import linkworthy.study.Study;

/** All that a trial depends on; its hash is the trial's id. */
record TrialKey(Study study, WorkUnit unit, CodecChoice codec) {
  private static final int ID_DIGITS = 16;

  /** The first 16 hexadecimal digits of the SHA-256 of the key. */
  String id() {
    StringBuilder text = new StringBuilder();
    text.append(study.seed()).append('\n');
    text.append(unit.entry().id()).append('\n');
    text.append(unit.entry().sha256())
        .append('\n')
        .append(study.pictures().longestSide())
        .append('\n');
    WorkUnit.Condition condition = unit.condition();
    if (condition != null) {
      text.append(condition.impairment().model().fingerprint()).append('\n');
      text.append(condition.impairment().site().id()).append('\n');
      text.append(condition.severity().axis()).append('\n');
      text.append(condition.severity().value()).append('\n');
    }
    text.append(unit.replicate()).append('\n');
    text.append(codec.identity()).append('\n');
    text.append(study.link()).append('\n');
    if (study.pictures().hasAllPlanes()) {
      text.append("planes all ").append(study.pictures().chroma()).append('\n');
    }
    if (!codec.codec().training().isEmpty()) {
      text.append(codec.codec().training()).append('\n');
    }
    ImpairmentChoice hop = study.rawHop();
    if (hop != null && codec.codec().hasHelpers()) {
      text.append("raw hop ").append(hop.model().fingerprint()).append(' ');
      text.append(hop.axis()).append(' ').append(hop.severities().get(0)).append('\n');
    }
    try {
      byte[] hash =
          MessageDigest.getInstance("SHA-256")
              .digest(text.toString().getBytes(StandardCharsets.UTF_8));
      return HexFormat.of().formatHex(hash).substring(0, ID_DIGITS);
    } catch (NoSuchAlgorithmException e) {
      throw new IllegalStateException(e);
    }
  }
}
