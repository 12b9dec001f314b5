package linkworthy.codec;

import java.util.Locale;

/** What is decoded when packets of a stream that knows no packets are missing. */
enum OnLoss {
  /** The bytes before the first missing one. */
  TRUNCATE,
  /** All bytes, zeros in place of the missing ones. */
  ZERO_FILL,
  /** Nothing. */
  DROP_PICTURE;

  /** The word used in studies. */
  String id() {
    return name().toLowerCase(Locale.ROOT).replace('_', '-');
  }
}
