package steelyard.balancer.live.http;

/** Why a message is not taken, as the result of its decoding. Has no stack: it is no error of ours. */
final class Refusal extends Exception {
    private static final long serialVersionUID = 1L;

    private final OwnAnswer answer;

    Refusal(OwnAnswer answer) {
        super(answer.text(), null, false, false);
        this.answer = answer;
    }

    OwnAnswer answer() {
        return answer;
    }
}
