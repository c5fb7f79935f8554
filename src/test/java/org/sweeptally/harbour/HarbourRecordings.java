package org.sweeptally.harbour;

import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.Comparator;
import java.util.List;
import java.util.Map;
import java.util.TreeMap;
import org.sweeptally.event.Detection;
import org.sweeptally.event.GeoPoint;
import org.sweeptally.event.OffsetFix;
import org.sweeptally.event.Part;
import org.sweeptally.region.text.PartJson;

/**
 * Radar and lidar of a small ferry in a Norwegian harbour and canal, 2021, with two vessels' true positions. Data: Autoferry
 * sensor fusion data set, CC0 1.0, published with doi 10.1016/j.oceaneng.2022.111042 (number from memory). They are
 * read from a folder beside the checkout and are no part of it.
 */
public final class HarbourRecordings {

    public static final List<Integer> SCENARIOS = List.of(2, 4, 13, 22);

    /** Where east and north are 0, and the radii that turn them into degrees; good to a centimetre here. */
    static final double LATITUDE = 63.4389029083;
    static final double LONGITUDE = 10.39908278;
    private static final double FLATTENING = 1 / 298.257223563;
    private static final double E2 = FLATTENING * (2 - FLATTENING);
    private static final double SIN = Math.sin(Math.toRadians(LATITUDE));
    private static final double MERIDIAN = 6378137.0 * (1 - E2) / Math.pow(1 - E2 * SIN * SIN, 1.5);
    private static final double PARALLEL =
            6378137.0 / Math.sqrt(1 - E2 * SIN * SIN) * Math.cos(Math.toRadians(LATITUDE));

    /** 2021-05-04T06:00:00Z, in microseconds. */
    private static final long BEGIN_MICROS = 1_620_108_000_000_000L;

    private final Path folder;

    private HarbourRecordings(Path folder) {
        this.folder = folder;
    }

    /** The recordings, or null where the folder is absent. */
    public static HarbourRecordings find() {
        Path shared = Path.of(System.getProperty("sweeptally.shared", "../shared"));
        Path folder = shared.resolve("data").resolve("harbour_radar_lidar");
        return Files.isDirectory(folder) ? new HarbourRecordings(folder) : null;
    }

    /** A look: which sensor, which number, when, and where the ferry was. */
    record Look(String sensor, int scan, double seconds, double east, double north, int arrival) {}

    List<Look> looks(int scenario, List<String> sensors) throws IOException {
        List<Look> looks = new ArrayList<>();
        for (Map<String, String> row : rows("scans.csv", scenario)) {
            if (sensors.contains(row.get("sensor"))) {
                looks.add(new Look(
                        row.get("sensor"), Integer.parseInt(row.get("scan_no")), number(row, "t_seconds"),
                        number(row, "own_east_m"), number(row, "own_north_m"),
                        Integer.parseInt(row.get("arrival_no"))));
            }
        }
        return looks;
    }

    /** All parts of some sensors as lines, in order of time or as they arrived. */
    public List<String> lines(int scenario, List<String> sensors, boolean asArrived) throws IOException {
        Map<String, List<Detection>> detections = new TreeMap<>();
        for (Map<String, String> row : rows("detections.csv", scenario)) {
            List<Detection> scan = detections.computeIfAbsent(
                    row.get("sensor") + row.get("scan_no"), key -> new ArrayList<>());
            scan.add(Detection.newBuilder()
                    .setIndex(scan.size())
                    .setId(row.get("sensor").charAt(0) + row.get("scan_no") + "-" + scan.size())
                    .setMeasurement(new OffsetFix(number(row, "rel_east_m"), number(row, "rel_north_m")))
                    .build());
        }
        List<Look> looks = looks(scenario, sensors);
        looks.sort(asArrived
                ? Comparator.comparingInt(Look::arrival)
                : Comparator.comparingDouble(Look::seconds).thenComparing(Look::sensor));
        return looks.stream()
                .map(look -> PartJson.write(part(look, detections.getOrDefault(look.sensor() + look.scan(), List.of()))))
                .toList();
    }

    private static Part part(Look look, List<Detection> detections) {
        return Part.newBuilder()
                .setSensor(look.sensor())
                .setScan((long) look.scan())
                .setScanTimeMicros(BEGIN_MICROS + Math.round(look.seconds() * 1000) * 1000)
                .setPart(0)
                .setClosesScan(true)
                .setSensorPosition(new GeoPoint(
                        LATITUDE + Math.toDegrees(look.north() / MERIDIAN),
                        LONGITUDE + Math.toDegrees(look.east() / PARALLEL),
                        null))
                .setDetections(detections)
                .build();
    }

    /** East and north of a place, metres. */
    static double[] toPlane(double latitude, double longitude) {
        return new double[] {
            Math.toRadians(longitude - LONGITUDE) * PARALLEL, Math.toRadians(latitude - LATITUDE) * MERIDIAN
        };
    }

    /** By vessel: [seconds, east, north] in order of time. */
    Map<String, List<double[]>> truth(int scenario) throws IOException {
        Map<String, List<double[]>> truth = new TreeMap<>();
        for (Map<String, String> row : rows("truth.csv", scenario)) {
            truth.computeIfAbsent(row.get("object_id"), id -> new ArrayList<>())
                    .add(new double[] {number(row, "t_seconds"), number(row, "east_m"), number(row, "north_m")});
        }
        return truth;
    }

    private List<Map<String, String>> rows(String file, int scenario) throws IOException {
        List<String> lines = Files.readAllLines(folder.resolve(file));
        String[] names = lines.get(0).split(",");
        List<Map<String, String>> rows = new ArrayList<>();
        for (String line : lines.subList(1, lines.size())) {
            String[] cells = line.split(",");
            Map<String, String> row = new TreeMap<>();
            for (int i = 0; i < names.length; i++) {
                row.put(names[i], cells[i]);
            }
            if (Integer.parseInt(row.get("scenario")) == scenario) {
                rows.add(row);
            }
        }
        return rows;
    }

    private static double number(Map<String, String> row, String name) {
        return Double.parseDouble(row.get(name));
    }
}
