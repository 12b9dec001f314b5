/** The judge: measures that compare a decoded picture with the clean one. */
@NullMarked
package linkworthy.quality;

import org.jspecify.annotations.NullMarked;
