package org.sweeptally.bench;

import java.util.ArrayList;
import java.util.List;
import java.util.Map;
import java.util.concurrent.Future;
import org.apache.kafka.clients.producer.KafkaProducer;
import org.apache.kafka.clients.producer.ProducerRecord;
import org.apache.kafka.clients.producer.RecordMetadata;
import org.sweeptally.event.Part;
import org.sweeptally.event.SensorPromise;
import org.sweeptally.region.wire.Wire;
import org.sweeptally.site.SensorSettings;
import org.sweeptally.site.Site;
import org.sweeptally.stream.BenchBus;

/** Scans that lie on the bus before anybody reads them. */
final class Backlog {

    private static final long INTERVAL_MICROS = 2_500_000;

    private Backlog() {}

    /** The parts of the first so many scans of a load; the last scan of each sensor promises that nothing follows. */
    static List<Part> parts(Site site, OperatorBench.Load load, int scans, long beginMicros) {
        List<String> sensors = site.sensors().stream().map(SensorSettings::name).toList();
        BenchScans made = new BenchScans(load.detections(), sensors, 1);
        List<Part> parts = new ArrayList<>();
        for (int i = 0; i < scans; i++) {
            List<Part> scan =
                    made.next(beginMicros + i * INTERVAL_MICROS, INTERVAL_MICROS / 1e6, load.perPart());
            if (i >= scans - sensors.size()) {
                scan.get(scan.size() - 1).setPromise(new SensorPromise((Long) null));
            }
            parts.addAll(scan);
        }
        return parts;
    }

    /** Puts a load on the bus, the last scan of which is of now; returns in how many parts. */
    static int lay(Site site, OperatorBench.Load load) throws Exception {
        long begin = System.currentTimeMillis() * 1000 - load.scans() * INTERVAL_MICROS;
        Map<String, Object> settings = BenchBus.clients().producer("backlog");
        // On a partition made just now a first batch that is sent again behind a second one is refused for ever.
        settings.put("max.in.flight.requests.per.connection", "1");
        List<Future<RecordMetadata>> sent = new ArrayList<>();
        try (KafkaProducer<byte[], byte[]> producer = new KafkaProducer<>(settings)) {
            for (Part part : parts(site, load, load.scans(), begin)) {
                sent.add(producer.send(new ProducerRecord<>(
                        BenchBus.names(site).detections(), new byte[] {'n'}, Wire.encode(part))));
            }
        }
        for (Future<RecordMetadata> one : sent) {
            one.get();
        }
        return sent.size();
    }
}
