package steelyard.harness.judge;

import java.util.Set;
import steelyard.harness.record.PlayListener;

/**
 * Adds one measure up, event by event. It is told only of what it {@link #hears}, and of the end; memory is fixed by
 * the stage and the length of the window.
 */
abstract class Meter implements PlayListener {
    abstract Set<Hears> hears();

    /** The measure, once the play has ended. */
    abstract Reading read();
}
