/**
 * The pictures: what a picture is, the manifest that lists them, and reading them safely.
 *
 * <p>What must stay fixed: nothing is allocated for a picture that its manifest does not announce;
 * every file is checked against its SHA-256 before it is used; samples are row-major, 0 to the peak
 * of the bit depth. What a manifest of one's own may hold is checked in one place, {@link
 * linkworthy.corpus.ManifestEntry}.
 *
 * <p>One more file format is one constant of {@code PictureFormat} (signature and reader), one line
 * in its round-trip test and one name in the fuzz test's list.
 */
@NullMarked
package linkworthy.corpus;

import org.jspecify.annotations.NullMarked;
