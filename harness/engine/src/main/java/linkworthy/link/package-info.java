/**
 * The way: how coded units become packets, how packets are protected, and what a packet costs.
 *
 * <p>What must stay fixed: every transmission is counted, in bits that are really there; whatever
 * arrives, the receiving side returns payloads and never throws; without protection the payloads
 * are those of the codec, byte for byte.
 *
 * <p>To add a way of protection: a part of {@link linkworthy.link.Protection.Rule} with its word in
 * the label and its line in the settings, its key in the study's reader, and what it does in {@link
 * linkworthy.link.Channel} or, if it writes into packets, in {@code Framing}.
 */
@NullMarked
package linkworthy.link;

import org.jspecify.annotations.NullMarked;
