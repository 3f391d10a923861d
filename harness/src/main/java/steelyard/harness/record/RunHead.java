package steelyard.harness.record;

import steelyard.drills.model.Drill;

/**
 * What is known of a play before it begins.
 *
 * @param drill what is played
 * @param source the text of the drill file
 * @param stage {@code live} or {@code virtual}
 * @param backends where the backends run: {@code embedded}, {@code containers} or {@code virtual}
 * @param seed of every draw
 * @param version of Steelyard
 */
public record RunHead(Drill drill, String source, String stage, String backends, long seed, String version) {}
