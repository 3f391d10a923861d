package steelyard.harness.stage;

import static org.assertj.core.api.Assertions.assertThat;

import java.util.List;
import java.util.Map;
import java.util.Set;
import org.junit.jupiter.api.Test;
import steelyard.drills.model.Traffic;

class ClienteleTest {
    private static final Clientele TWO_STREAMS = new Clientele(List.of(stream(3), stream(70_000)));

    @Test
    void clients_areNumberedOverAllStreams() {
        assertThat(TWO_STREAMS.count()).isEqualTo(70_003);
        assertThat(TWO_STREAMS.number(0, 2)).isEqualTo(2);
        assertThat(TWO_STREAMS.number(1, 0)).isEqualTo(3);
    }

    // 66,051 = 1 x 65,536 + 2 x 256 + 3.
    @Test
    void address_ofAClient_isItsNumberInOctets() {
        assertThat(Clientele.address(0)).isEqualTo("127.64.0.0");
        assertThat(Clientele.address(66_051)).isEqualTo("127.65.2.3");
        assertThat(Clientele.address(Clientele.MOST - 1)).isEqualTo("127.255.255.255");
        assertThat(Clientele.address(Clientele.MOST)).isEqualTo("127.64.0.0");
    }

    @Test
    void pathAndHeader_holdTheNumberWhereTheDrillSaysSo() {
        assertThat(TWO_STREAMS.path(1, 0, 4)).isEqualTo("/holds/7?of=7");
        assertThat(TWO_STREAMS.header(1, 0, 4, "x-cabin")).isEqualTo("deck-7");
        assertThat(TWO_STREAMS.header(1, 0, 4, "x-berth")).isNull();
    }

    private static Traffic stream(int clients) {
        Traffic.Request request = new Traffic.Request(
                "GET", "/holds/{client}?of={client}", 1, 0, Set.of(), Map.of("X-Cabin", "deck-{client}"), null, 0);
        return new Traffic(
                "seats",
                Traffic.Arrivals.EVEN,
                List.of(new Traffic.Step(1_000_000_000, 1)),
                clients,
                0,
                1_000_000_000,
                List.of(request));
    }
}
