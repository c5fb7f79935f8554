package org.sweeptally.harbour;

import com.fasterxml.jackson.databind.ObjectMapper;
import com.fasterxml.jackson.databind.node.ArrayNode;
import com.fasterxml.jackson.databind.node.ObjectNode;
import java.io.IOException;
import java.math.BigDecimal;
import java.math.RoundingMode;
import java.nio.file.Files;
import java.nio.file.Path;
import java.time.Instant;
import java.time.ZoneOffset;
import java.time.format.DateTimeFormatter;
import java.util.ArrayList;
import java.util.Comparator;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import java.util.SortedMap;
import java.util.TreeMap;

/**
 * Recordings of a radar and a lidar on a small ferry in a Norwegian harbour and canal, 2021, with true positions of
 * two vessels (Autoferry sensor fusion dataset, CC0). They lie beside the checkout, in {@code ../shared} or wherever
 * the system property {@code sweeptally.shared} says, and are never copied into it.
 */
public final class HarbourRecordings {

    /** The scenarios that are there: 2 and 4 in the open harbour, 13 and 22 in the canal. */
    public static final List<Integer> SCENARIOS = List.of(2, 4, 13, 22);

    private static final Instant BEGINNING = Instant.parse("2021-05-04T06:00:00Z");
    private static final DateTimeFormatter STAMP =
            DateTimeFormatter.ofPattern("yyyy-MM-dd'T'HH:mm:ss.SSS'Z'").withZone(ZoneOffset.UTC);
    private static final ObjectMapper JSON = new ObjectMapper();

    /** In which order parts are given out. */
    public enum Order {
        /** By scan time, then by sensor. */
        TIME,
        /** As the source delivered them, where scans of one sensor come late behind another's. */
        ARRIVAL
    }

    /** A true place, metres in the recordings' plane. */
    public record Truth(double seconds, double east, double north) {}

    private final Path folder;

    public HarbourRecordings(Path folder) {
        this.folder = folder;
    }

    /** Where they lie, if they are there. */
    public static Path folder() {
        return Path.of(System.getProperty("sweeptally.shared", "../shared"), "data", "harbour_radar_lidar");
    }

    /** Parts of scans, one JSON object a line. */
    public List<String> parts(int scenario, List<String> sensors, Order order) throws IOException {
        SortedMap<String, List<Map<String, String>>> detections = new TreeMap<>();
        for (Map<String, String> row : rows("detections.csv", scenario)) {
            detections.computeIfAbsent(scan(row), key -> new ArrayList<>()).add(row);
        }
        List<Map<String, String>> scans = new ArrayList<>(rows("scans.csv", scenario));
        scans.removeIf(row -> !sensors.contains(row.get("sensor")));
        Comparator<Map<String, String>> byTime = Comparator.comparingDouble(row -> number(row, "t_seconds"));
        scans.sort(
                order == Order.ARRIVAL
                        ? Comparator.comparingInt(row -> Integer.parseInt(row.get("arrival_no")))
                        : byTime.thenComparing(row -> row.get("sensor")));
        List<String> lines = new ArrayList<>();
        for (Map<String, String> row : scans) {
            lines.add(JSON.writeValueAsString(part(row, detections.getOrDefault(scan(row), List.of()))));
        }
        return lines;
    }

    /** Times of a sensor's scans, seconds, by scan number in the order of the file. */
    public SortedMap<Integer, Double> scanSeconds(int scenario, String sensor) throws IOException {
        SortedMap<Integer, Double> seconds = new TreeMap<>();
        for (Map<String, String> row : rows("scans.csv", scenario)) {
            if (row.get("sensor").equals(sensor)) {
                seconds.put(Integer.parseInt(row.get("scan_no")), number(row, "t_seconds"));
            }
        }
        return seconds;
    }

    /** True places of each vessel in order of time. */
    public SortedMap<String, List<Truth>> truth(int scenario) throws IOException {
        SortedMap<String, List<Truth>> truth = new TreeMap<>();
        for (Map<String, String> row : rows("truth.csv", scenario)) {
            truth.computeIfAbsent(row.get("object_id"), key -> new ArrayList<>())
                    .add(new Truth(number(row, "t_seconds"), number(row, "east_m"), number(row, "north_m")));
        }
        return truth;
    }

    private static ObjectNode part(Map<String, String> row, List<Map<String, String>> detections) {
        ObjectNode part = JSON.createObjectNode();
        part.put("sensor", row.get("sensor"));
        part.put("scan", Integer.parseInt(row.get("scan_no")));
        part.put("scanTime", stamp(number(row, "t_seconds")));
        part.put("part", 0);
        part.put("closesScan", true);
        part.putObject("sensorPosition")
                .put("latitude", rounded(HarbourPlane.latitude(number(row, "own_north_m"))))
                .put("longitude", rounded(HarbourPlane.longitude(number(row, "own_east_m"))));
        ArrayNode list = part.putArray("detections");
        for (int i = 0; i < detections.size(); i++) {
            list.addObject()
                    .put("id", row.get("sensor").charAt(0) + row.get("scan_no") + "-" + i)
                    .put("eastMetres", number(detections.get(i), "rel_east_m"))
                    .put("northMetres", number(detections.get(i), "rel_north_m"));
        }
        return part;
    }

    private static String stamp(double seconds) {
        return STAMP.format(BEGINNING.plusNanos(1000 * Math.round(seconds * 1e6)));
    }

    private static double rounded(double degrees) {
        return new BigDecimal(degrees).setScale(9, RoundingMode.HALF_EVEN).doubleValue();
    }

    private static String scan(Map<String, String> row) {
        return row.get("sensor") + " " + row.get("scan_no");
    }

    private static double number(Map<String, String> row, String column) {
        return Double.parseDouble(row.get(column));
    }

    private List<Map<String, String>> rows(String file, int scenario) throws IOException {
        List<String> lines = Files.readAllLines(folder.resolve(file));
        String[] columns = lines.get(0).split(",");
        List<Map<String, String>> rows = new ArrayList<>();
        for (String line : lines.subList(1, lines.size())) {
            String[] fields = line.split(",", -1);
            if (Integer.parseInt(fields[0]) == scenario) {
                Map<String, String> row = new LinkedHashMap<>();
                for (int i = 0; i < columns.length; i++) {
                    row.put(columns[i], fields[i]);
                }
                rows.add(row);
            }
        }
        return rows;
    }
}
