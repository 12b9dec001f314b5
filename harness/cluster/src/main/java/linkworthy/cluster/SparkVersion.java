package linkworthy.cluster;

import linkworthy.input.Unavailable;

/** Which Spark this is. */
final class SparkVersion {
  private static final String SCALA = "2.13";
  private static final String ACCEPTED = "Spark 4.1 or a later 4, built for Scala " + SCALA;

  private SparkVersion() {}

  /**
   * @param spark version of Spark
   * @param scala version of its Scala
   * @throws Unavailable if this program was not built for it
   */
  static void require(String spark, String scala) {
    if (!spark.matches("4\\.[1-9]\\d*(\\..*)?") || !scala.matches("2\\.13(\\..*)?")) {
      throw new Unavailable(
          "this is Spark " + spark + " for Scala " + scala + "; accepted: " + ACCEPTED);
    }
  }
}
