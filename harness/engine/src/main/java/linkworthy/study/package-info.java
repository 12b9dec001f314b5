/**
 * The question: a study file, read strictly, with every default written out.
 *
 * <p>What must stay fixed: whatever is wrong is said with file, line and key before any work
 * begins; every default stands in the resource {@code defaults.yaml} and nowhere else; the
 * canonical text reads back to an equal study, has no path of the machine in it, and its
 * fingerprint covers all that determines a row of the record.
 *
 * <p>To add a key: its default in {@code defaults.yaml}, a component of the record, one line each
 * in {@link linkworthy.study.StudyReader} and {@link linkworthy.study.StudyWriter}, a mistake in
 * the reader's test and a change in the fingerprint's. A changed canonical text changes every
 * fingerprint, so leave the order and the form of the other keys alone.
 */
@NullMarked
package linkworthy.study;

import org.jspecify.annotations.NullMarked;
