package steelyard.harness.stage.live;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;

import java.net.InetSocketAddress;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.ValueSource;
import steelyard.drills.model.Drill;
import steelyard.drills.read.DrillReader;
import steelyard.drills.read.Parsed;
import steelyard.harness.stage.CannotPlay;

class ClientAddressesTest {
    /** Of the block TEST-NET-1 (RFC 5737, section 3): no machine has it, so that nothing can be bound there. */
    private static final InetSocketAddress NOWHERE = new InetSocketAddress("192.0.2.1", 0);

    private static final InetSocketAddress HERE = new InetSocketAddress("127.0.0.1", 0);

    private static Drill drill(String pool) {
        Parsed<Drill> parsed = DrillReader.read("clients.yaml", """
                drill: Clients
                about: Ferries are known by where they call from.
                stage:
                  pools:
                    seats: {%s, serves: {workers: 8, time: 1ms}, backends: {fulmar: , gannet: }}
                traffic: [{to: seats, rate: 10/s}]
                lasts: 1s
                """.formatted(pool));
        return parsed.value().orElseThrow(() -> new AssertionError(parsed.problems()));
    }

    @Test
    void of_whereAddressesCanBeBound_givesEachClientItsOwn() throws CannotPlay {
        ClientAddresses addresses = ClientAddresses.of(drill("method: hash, hash: {by: client}"), HERE);
        assertThat(addresses.own()).isTrue();
        // 300 = 1 x 256 + 44
        assertThat(addresses.of(300)).isEqualTo(new InetSocketAddress("127.64.1.44", 0));
    }

    @ParameterizedTest
    @ValueSource(
            strings = {
                "method: hash, hash: {by: client}",
                "method: round-robin, affinity: client",
                "method: random, affinity: {by: client, lasts: 5m}"
            })
    void of_whereNoneCanBeBound_refusesADrillThatTellsClientsApartByThem(String pool) {
        assertThatThrownBy(() -> ClientAddresses.of(drill(pool), NOWHERE))
                .isInstanceOf(CannotPlay.class)
                .hasMessage("pool seats knows clients by their addresses, and this system lets them connect from"
                        + " 127.0.0.1 alone: give lo the whole of 127.0.0.0/8, or forecast the drill");
    }

    @ParameterizedTest
    @ValueSource(strings = {"method: hash, hash: {by: path}", "method: round-robin, affinity: cookie"})
    void of_whereNoneCanBeBound_letsTheSystemChooseForAnyOtherDrill(String pool) throws CannotPlay {
        ClientAddresses addresses = ClientAddresses.of(drill(pool), NOWHERE);
        assertThat(addresses.own()).isFalse();
        assertThat(addresses.of(300)).isNull();
    }
}
