package linkworthy.study;

/** The study file that the command {@code begin} writes. */
public final class StudyTemplate {
  private StudyTemplate() {}

  /** A commented study that runs as it is, on the shipped pictures. */
  public static String text() {
    return StudyReader.resource("template.yaml");
  }
}
