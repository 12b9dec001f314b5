package linkworthy.trial;

/**
 * One node's part in a codec that has helper nodes: means over the clean pictures of a study.
 *
 * @param codec label of the codec
 * @param node 0 the camera, from 1 its helpers
 * @param macs multiply-accumulates
 * @param memoryKib peak working memory, in KiB
 * @param rawSentBits raw samples passed on, packet overhead included
 * @param rawReceivedBits raw samples got, packet overhead included
 * @param codedSentBits coded packets, overhead included
 * @param receivedBits acknowledgements
 * @param energyMj in millijoules
 */
public record NodeShare(
    String codec,
    int node,
    double macs,
    double memoryKib,
    double rawSentBits,
    double rawReceivedBits,
    double codedSentBits,
    double receivedBits,
    double energyMj) {}
