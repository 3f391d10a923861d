/**
 * What a drill file says, as immutable records that check themselves.
 *
 * <p>Purpose: the words of the drill format as types, with every reference resolved (targets to backends, instants to
 * nanoseconds of play time), so that nothing behind the reader looks a name up twice. Allowed dependencies: the JDK.
 * Thread rule: every type is immutable and may be shared freely. First class to read: {@link
 * steelyard.drills.model.Drill}.
 *
 * <p>Durations and instants are {@code long} nanoseconds; instants count from the start of the play. Shares are
 * fractions from 0 to 1. A constructor that is given something impossible throws {@link IllegalArgumentException};
 * the reader never lets it come to that.
 */
@NullMarked
package steelyard.drills.model;

import org.jspecify.annotations.NullMarked;
