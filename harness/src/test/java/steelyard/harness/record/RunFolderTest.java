package steelyard.harness.record;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;

import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;

class RunFolderTest {

    @Test
    void create_newOrEmpty_isThereAndEmpty(@TempDir Path dir) throws Exception {
        Path fresh = dir.resolve("runs/first");

        assertThat(RunFolder.create(fresh).path()).isEqualTo(fresh);
        assertThat(fresh).isEmptyDirectory();
        assertThat(RunFolder.create(fresh).file("run.json")).isEqualTo(fresh.resolve("run.json"));
    }

    @Test
    void create_notEmpty_isRefused(@TempDir Path dir) throws IOException {
        Files.writeString(dir.resolve("something"), "here");

        assertThatThrownBy(() -> RunFolder.create(dir))
                .isInstanceOf(FolderRefused.class)
                .hasMessage(dir + " is already there and not empty; name another folder or remove it");
    }

    @Test
    void create_fileOrBelowAFile_isRefused(@TempDir Path dir) throws IOException {
        Path file = Files.writeString(dir.resolve("file"), "here");

        assertThatThrownBy(() -> RunFolder.create(file))
                .isInstanceOf(FolderRefused.class)
                .hasMessage(file + " is a file; name a folder that does not exist yet");
        assertThatThrownBy(() -> RunFolder.create(file.resolve("run")))
                .isInstanceOf(FolderRefused.class)
                .hasMessageContaining("cannot be made, since file is a file");
    }

    @Test
    void existing_withoutRun_isRefused(@TempDir Path dir) {
        assertThatThrownBy(() -> RunFolder.existing(dir))
                .isInstanceOf(FolderRefused.class)
                .hasMessage(dir + " holds no run: there is no run.json in it");
    }
}
