package linkworthy.trial;

import java.util.Collections;
import java.util.LinkedHashMap;
import java.util.Map;

/**
 * One row of the record: a picture through one realisation of noise, one codec and back.
 *
 * @param trial stable id: a hash of the trial's full key
 * @param picture id of the picture in its manifest
 * @param impairment name of the noise model, {@code none} for clean
 * @param actsOn {@code samples}, {@code packets}, {@code bits}, or empty for clean
 * @param axis key the severity was given by, or empty for clean
 * @param severity value on that axis; NaN for clean
 * @param equivalentNoiseVariance grey levels squared; 0 for clean
 * @param realisedNoiseVariance of this very realisation, grey levels squared; 0 for clean
 * @param snrDb signal power over equivalent noise variance, in dB; NaN for clean
 * @param codec label of the codec
 * @param transform basis of the transform codec, {@code jpeg} or the wavelet, or empty
 * @param over arrangement, as in {@code blocks8} or {@code levels5}, or empty
 * @param keep components in force, for JPEG the quality in force, or -1
 * @param step quantiser step in grey levels, {@code none}, or empty
 * @param replicate from 0
 * @param mse against the clean picture, grey levels squared
 * @param psnrDb in dB; positive infinity for identical pictures
 * @param ssim structural similarity, or NaN where the study does not ask for it
 * @param payloadBits bits in the payloads of all transmissions: data, parity, copies and further
 *     tries, with the headers that protection needs
 * @param sentBits payload bits, the link's overhead for each transmission, and the acknowledgements
 *     that the receiver sends, and frame checks
 * @param bitsPerPixel sent bits per sample of the picture
 * @param packetsSent transmissions of packets: data, parity, copies and further tries, but not
 *     acknowledgements, which are never lost
 * @param packetsLost those of them that did not arrive or were dropped by a frame check, whether or
 *     not protection made up for it
 * @param outage whether nothing usable arrived, or the codec failed
 * @param failure the word of the codec's failure, or empty; mid-grey was judged then
 * @param further figures of the study's measures besides psnr and ssim, by column, in study order
 */
public record Trial(
    String trial,
    String picture,
    String impairment,
    String actsOn,
    String axis,
    double severity,
    double equivalentNoiseVariance,
    double realisedNoiseVariance,
    double snrDb,
    String codec,
    String transform,
    String over,
    int keep,
    String step,
    int replicate,
    double mse,
    double psnrDb,
    double ssim,
    long payloadBits,
    long sentBits,
    double bitsPerPixel,
    int packetsSent,
    int packetsLost,
    boolean outage,
    String failure,
    Map<String, Double> further) {
  public Trial {
    further = Collections.unmodifiableMap(new LinkedHashMap<>(further));
  }

  /** A row like this one under the key of another unit, with another id, noise and PSNR. */
  public Trial movedTo(WorkUnit unit, String id, double otherNoiseVariance, double otherPsnrDb) {
    return new Trial(
        id,
        unit.entry().id(),
        unit.impairment(),
        unit.actsOn(),
        unit.axis(),
        unit.severity(),
        otherNoiseVariance,
        realisedNoiseVariance,
        snrDb,
        codec,
        transform,
        over,
        keep,
        step,
        unit.replicate(),
        mse,
        otherPsnrDb,
        ssim,
        payloadBits,
        sentBits,
        bitsPerPixel,
        packetsSent,
        packetsLost,
        outage,
        failure,
        further);
  }
}
