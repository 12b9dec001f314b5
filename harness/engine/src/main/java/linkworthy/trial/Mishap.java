package linkworthy.trial;

import linkworthy.codec.Failure;

/**
 * A codec's failure in one trial, in more words than the record has.
 *
 * @param codec label of the codec
 * @param picture id of the picture
 */
public record Mishap(String codec, String picture, Failure failure) {}
