/**
 * Reading what users wrote: strict YAML with line numbers, one-line errors, nearest spellings.
 *
 * <p>What must stay fixed: every refusal is one line that says where, what was found and what is
 * accepted; {@link linkworthy.input.BadInput} ends the program with exit code 2 and {@link
 * linkworthy.input.Unavailable} with 3; nothing here expands anchors or reads without a size limit.
 */
@NullMarked
package linkworthy.input;

import org.jspecify.annotations.NullMarked;
