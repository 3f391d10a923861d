package steelyard.harness.stage.live;

import steelyard.backends.stub.BackendListener;

/** Tells the account what the backends did. Attempts are numbered as the balancer's header numbers them: from 1. */
final class BackendAccount implements BackendListener {
    private final Account account;
    private final PlayClock clock;

    BackendAccount(Account account, PlayClock clock) {
        this.account = account;
        this.clock = clock;
    }

    @Override
    public void received(int backend, long request, int attempt, long atNanos) {
        tell(atNanos, (to, at) -> to.backendReceived(at, backend, request, attempt));
    }

    @Override
    public void ended(int backend, long request, int attempt, boolean answeredInFull, int status, long atNanos) {
        tell(atNanos, (to, at) -> to.backendEnded(at, backend, request, attempt, answeredInFull, status));
    }

    private void tell(long atNanos, Account.Telling telling) {
        account.tell(Account.Source.BACKENDS, clock.playNanos(atNanos), telling);
    }
}
