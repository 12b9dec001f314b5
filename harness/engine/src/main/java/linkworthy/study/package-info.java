/** The question: a study file, read strictly, with every default written out. */
@NullMarked
package linkworthy.study;

import org.jspecify.annotations.NullMarked;
