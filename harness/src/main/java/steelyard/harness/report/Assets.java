package steelyard.harness.report;

import java.io.IOException;
import java.io.InputStream;
import java.nio.charset.StandardCharsets;
import java.util.List;
import java.util.Map;
import java.util.Properties;
import java.util.regex.Matcher;
import java.util.regex.Pattern;

/** The page's parts that are files: its skeleton, styles and scripts, and the chart library. */
final class Assets {
    private static final String LIBRARY = "/META-INF/resources/webjars/uplot/";
    private static final Pattern SLOT = Pattern.compile("\\{\\{([a-z-]+)}}");

    /** Our scripts: an earlier one knows nothing of a later one while the page loads. */
    private static final List<String> PARTS = List.of(
            "figures.js",
            "ink.js",
            "layers.js",
            "weigh.js",
            "charts.js",
            "stack.js",
            "rail.js",
            "readout.js",
            "start.js");

    private Assets() {}

    static String styles() throws IOException {
        return library("dist/uPlot.min.css") + "\n" + own("report.css");
    }

    /** The library, its licence beside it, and our scripts, which share one scope. */
    static String scripts() throws IOException {
        StringBuilder scripts = new StringBuilder();
        scripts.append("/*\n").append(library("LICENSE").strip()).append("\n*/\n");
        scripts.append(library("dist/uPlot.iife.min.js")).append("\n(() => {\n'use strict';\n");
        for (String part : PARTS) {
            scripts.append(own(part));
        }
        return scripts.append("})();\n").toString();
    }

    /** The skeleton with its slots filled, in one pass, so that no value is read as a slot. */
    static String page(Map<String, String> values) throws IOException {
        return page("report.html", values);
    }

    static String page(String skeleton, Map<String, String> values) throws IOException {
        StringBuilder page = new StringBuilder();
        Matcher slot = SLOT.matcher(own(skeleton));
        while (slot.find()) {
            String value = values.get(slot.group(1));
            if (value == null) {
                throw new IllegalStateException("no value for the slot " + slot.group(1));
            }
            slot.appendReplacement(page, Matcher.quoteReplacement(value));
        }
        return slot.appendTail(page).toString();
    }

    static String own(String name) throws IOException {
        return read("/steelyard/harness/report/" + name);
    }

    private static String library(String name) throws IOException {
        Properties pom = new Properties();
        try (InputStream in = open("/META-INF/maven/org.webjars.npm/uplot/pom.properties")) {
            pom.load(in);
        }
        return read(LIBRARY + pom.getProperty("version") + "/" + name);
    }

    private static String read(String path) throws IOException {
        try (InputStream in = open(path)) {
            return new String(in.readAllBytes(), StandardCharsets.UTF_8);
        }
    }

    private static InputStream open(String path) throws IOException {
        InputStream in = Assets.class.getResourceAsStream(path);
        if (in == null) {
            throw new IOException("not on the class path: " + path);
        }
        return in;
    }
}
