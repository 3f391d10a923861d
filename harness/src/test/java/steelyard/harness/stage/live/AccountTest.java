package steelyard.harness.stage.live;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;

import java.util.ArrayList;
import java.util.List;
import java.util.Set;
import java.util.concurrent.ConcurrentHashMap;
import java.util.concurrent.atomic.AtomicLong;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.Timeout;
import steelyard.harness.record.PlayListener;

/** Time is a number that the test sets; only {@code finish} and the hold of the account's own thread pass entries on. */
@Timeout(30)
class AccountTest {
    private final AtomicLong now = new AtomicLong();
    private final List<String> heard = new ArrayList<>();
    private final Set<Thread> threads = ConcurrentHashMap.newKeySet();
    private final List<RuntimeException> failures = new ArrayList<>();

    private final PlayListener listener = new PlayListener() {
        @Override
        public void connectionCapHit(long atNanos) {
            threads.add(Thread.currentThread());
            heard.add("cap at " + atNanos);
        }

        @Override
        public void nobodyPicked(long atNanos, int pool, long request, int attempt) {
            heard.add("nobody for " + request + " at " + atNanos);
        }

        @Override
        public void requestSent(long atNanos, long request, long dueNanos) {
            throw new IllegalStateException("no room on the disk");
        }

        @Override
        public void ended(long atNanos, boolean complete) {
            heard.add("ended " + complete + " at " + atNanos);
        }
    };

    private final Account account = new Account(listener, now::get, failures::add);

    @Test
    void entries_areHeardByTimeThenSourceThenOrder() {
        nobody(3, 20);
        nobody(2, 10);
        account.tell(Account.Source.TRAFFIC, 10, PlayListener::connectionCapHit);
        nobody(1, 10);
        account.start();
        now.set(25);
        account.finish(true);
        assertThat(heard)
                .containsExactly(
                        "cap at 10",
                        "nobody for 2 at 10",
                        "nobody for 1 at 10",
                        "nobody for 3 at 20",
                        "ended true at 25");
        assertThat(account.late()).isZero();
    }

    @Test
    void entry_behindWhatWasHeard_takesItsPredecessorsTimeAndIsCounted() throws InterruptedException {
        account.start();
        now.set(1_000);
        account.tell(Account.Source.TRAFFIC, 500, PlayListener::connectionCapHit);
        while (threads.isEmpty()) {
            Thread.sleep(5);
        }
        nobody(1, 400);
        account.finish(false);
        assertThat(heard).containsExactly("cap at 500", "nobody for 1 at 500", "ended false at 1000");
        assertThat(account.late()).isEqualTo(1);
    }

    @Test
    void entries_afterTheHold_waitForTheGenerator() throws InterruptedException {
        account.holdAfter(500);
        account.start();
        now.set(1_000);
        nobody(1, 600);
        account.tell(Account.Source.TRAFFIC, 500, PlayListener::connectionCapHit);
        while (threads.isEmpty()) {
            Thread.sleep(5);
        }
        account.tell(Account.Source.TRAFFIC, 550, PlayListener::connectionCapHit);
        account.holdAfter(1_000);
        account.finish(true);
        assertThat(heard).containsExactly("cap at 500", "cap at 550", "nobody for 1 at 600", "ended true at 1000");
        assertThat(account.late()).isZero();
    }

    @Test
    void listener_thatFails_hearsNoMoreAndIsReported() {
        account.tell(Account.Source.TRAFFIC, 1, (to, at) -> to.requestSent(at, 0, 0));
        nobody(1, 2);
        account.start();
        assertThatThrownBy(() -> account.finish(true)).hasMessage("no room on the disk");
        assertThat(heard).isEmpty();
        assertThat(failures).hasSize(1);
    }

    private void nobody(long request, long atNanos) {
        account.tell(Account.Source.BALANCER, atNanos, (to, at) -> to.nobodyPicked(at, 0, request, 1));
    }
}
