package steelyard.harness.cli;

/** What the process ends with. */
final class ExitStatus {
    /** Every expectation was met; or there was nothing to judge and nothing went wrong. */
    static final int MET = 0;

    /** An expectation was not met. */
    static final int NOT_MET = 1;

    /** The drill or the command line is wrong. */
    static final int WRONG = 2;

    /** It could not be played here, or the play is unfit to judge. */
    static final int CANNOT = 3;

    private ExitStatus() {}
}
