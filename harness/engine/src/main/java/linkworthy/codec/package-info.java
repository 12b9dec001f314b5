/**
 * The options compared: codecs turn a picture into packets and packets that arrive back into a
 * picture.
 */
@NullMarked
package linkworthy.codec;

import org.jspecify.annotations.NullMarked;
