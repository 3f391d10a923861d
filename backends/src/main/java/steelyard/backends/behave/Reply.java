package steelyard.backends.behave;

/** How a behaviour's part in one request ends. A request meets exactly one of these, once. */
public enum Reply {
    /** The work is done: send the answer. */
    ANSWER,
    /** Workers and queue are full: answer 503 at once. */
    TURNED_AWAY,
    /** A fault strikes this request: answer with the fault's status. */
    FAULT,
    /** Never answer: leave the connection open and say nothing. */
    SILENCE,
    /** The process died under it: the connection goes with it, there is nothing to send. */
    LOST,
    /** The work is done, but nobody waits for it any more: send nothing. */
    DROPPED
}
