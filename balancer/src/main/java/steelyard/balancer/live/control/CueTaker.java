package steelyard.balancer.live.control;

/** Whoever plays a drill takes the cues that a person sends to the control page. Called from one thread of the page. */
@FunctionalInterface
public interface CueTaker {
    /** Nobody plays. */
    CueTaker NOBODY = cue -> Reply.NOTHING_PLAYS;

    /**
     * Takes a cue to be carried out at once.
     *
     * @param cue the text as it was sent, in the words of a drill
     */
    Reply take(String cue);

    /**
     * What became of a cue.
     *
     * @param line one line for the person who sent it, without a line end
     */
    record Reply(Kind kind, String line) {
        static final Reply NOTHING_PLAYS = new Reply(Kind.NOTHING_PLAYS, "nothing is played: send cues during a play");

        /** It will be carried out at once. */
        public static Reply taken(String line) {
            return new Reply(Kind.TAKEN, line);
        }

        /** It is no cue of this drill; the line says what is wrong with it. */
        public static Reply refused(String line) {
            return new Reply(Kind.REFUSED, line);
        }

        /** There is no play that it could change. */
        public static Reply nothingPlays() {
            return NOTHING_PLAYS;
        }
    }

    /** How a cue fared. */
    enum Kind {
        TAKEN,
        REFUSED,
        NOTHING_PLAYS
    }
}
