package linkworthy.statistics;

import java.util.Map;
import linkworthy.trial.Trial;

/** A trial of an 8-bit picture under gaussian noise; what matters to a test is set by it. */
record TrialBuilder(
    String codec,
    String transform,
    String over,
    int keep,
    String step,
    String impairment,
    double severity,
    double ssim,
    double bitsPerPixel,
    double noiseVariance,
    double realised,
    boolean outage,
    Map<String, Double> further) {
  static TrialBuilder of(String codec) {
    return new TrialBuilder(
        codec, "pca", "rows", 8, "8", "gaussian", 20, 0.9, 1.5, 40, 39, false, Map.of());
  }

  TrialBuilder described(String newTransform, String newOver, int newKeep, String newStep) {
    return new TrialBuilder(
        codec,
        newTransform,
        newOver,
        newKeep,
        newStep,
        impairment,
        severity,
        ssim,
        bitsPerPixel,
        noiseVariance,
        realised,
        outage,
        further);
  }

  TrialBuilder severity(double newSeverity) {
    return new TrialBuilder(
        codec,
        transform,
        over,
        keep,
        step,
        impairment,
        newSeverity,
        ssim,
        bitsPerPixel,
        noiseVariance,
        realised,
        outage,
        further);
  }

  TrialBuilder clean() {
    return new TrialBuilder(
        codec,
        transform,
        over,
        keep,
        step,
        "none",
        Double.NaN,
        ssim,
        bitsPerPixel,
        0,
        0,
        outage,
        further);
  }

  TrialBuilder measured(
      double newSsim, double newBits, double newVariance, double newRealised, boolean newOutage) {
    return new TrialBuilder(
        codec,
        transform,
        over,
        keep,
        step,
        impairment,
        severity,
        newSsim,
        newBits,
        newVariance,
        newRealised,
        newOutage,
        further);
  }

  TrialBuilder further(Map<String, Double> newFurther) {
    return new TrialBuilder(
        codec,
        transform,
        over,
        keep,
        step,
        impairment,
        severity,
        ssim,
        bitsPerPixel,
        noiseVariance,
        realised,
        outage,
        newFurther);
  }

  Trial trial(String picture, int replicate, double psnrDb) {
    boolean isClean = Double.isNaN(severity);
    return new Trial(
        picture + "/" + codec + "/" + replicate,
        picture,
        impairment,
        isClean ? "" : "samples",
        isClean ? "" : "snr-db",
        severity,
        noiseVariance,
        realised,
        isClean ? Double.NaN : 10 * StrictMath.log10(4000 / noiseVariance),
        codec,
        transform,
        over,
        keep,
        step,
        replicate,
        65_025 * StrictMath.pow(10, -psnrDb / 10),
        psnrDb,
        ssim,
        8_000,
        9_000,
        bitsPerPixel,
        4,
        0,
        outage,
        "",
        further);
  }
}
