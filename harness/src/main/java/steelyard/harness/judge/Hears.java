package steelyard.harness.judge;

/** The kinds of events that a meter may ask to be told of; whatever it does not ask for costs it nothing. */
enum Hears {
    REQUESTS,
    PICKS,
    ATTEMPT_ENDS,
    STANDINGS,
    WEIGHTS,
    CUES,
    SAMPLES
}
