package steelyard.harness.report;

import static org.assertj.core.api.Assertions.assertThat;

import org.junit.jupiter.api.Test;

class HtmlTest {
    @Test
    void prose_withOptions_keepsTheirHyphensOnOneLine() {
        assertThat(Html.prose("tune a<b --vary probe.every=1s --against standing-changes, at once -- or not"))
                .isEqualTo("tune a&lt;b <span class=\"whole\">--vary</span> probe.every=1s "
                        + "<span class=\"whole\">--against</span> standing-changes, at once -- or not");
    }
}
