package org.sweeptally.replay;

import com.fasterxml.jackson.core.JsonProcessingException;
import com.fasterxml.jackson.databind.ObjectMapper;
import com.fasterxml.jackson.databind.node.ArrayNode;
import com.fasterxml.jackson.databind.node.ObjectNode;
import java.util.Locale;
import org.sweeptally.filter.LogOdds;
import org.sweeptally.filter.ObjectEvidence;
import org.sweeptally.filter.ScanEvidence;
import org.sweeptally.region.intake.Times;

/** The evidence of one scan for one object as a line of JSON; what is not there, or not finite, is null. */
final class EvidenceJson {

    private static final ObjectMapper JSON = new ObjectMapper();

    private EvidenceJson() {}

    static String line(String region, ScanEvidence scan, ObjectEvidence object) {
        ObjectNode line = JSON.createObjectNode();
        line.put("region", region).put("object", object.identity().text());
        line.put("sensor", scan.sensor()).put("scanTime", Times.text(scan.scanTimeMicros()));
        line.put("time", Times.text(scan.logTimeMicros()));
        number(line, "existenceBefore", LogOdds.probability(object.before()));
        number(line, "existenceAfter", LogOdds.probability(object.after()));
        number(line, "logOddsBefore", object.before());
        number(line, "logOddsAfter", object.after());
        ArrayNode steps = line.putArray("steps");
        for (ObjectEvidence.Step step : object.steps()) {
            number(steps.addObject().put("step", step.kind().name().toLowerCase(Locale.ROOT)), "change", step.change());
        }
        number(line, "probabilityOfDetection", object.probabilityOfDetection());
        number(line, "detectable", object.detectable());
        number(line, "whenDetectable", object.whenDetectable());
        ArrayNode gated = line.putArray("detections");
        object.gated().forEach(detection -> detection(gated.addObject(), detection));
        ObjectEvidence.Beginning beginning = object.beginning();
        if (beginning != null) {
            ObjectNode began = line.putObject("began");
            began.put("part", beginning.part()).put("index", beginning.index()).put("id", beginning.id());
            number(began, "newObjectsPerSquareMetre", beginning.unseen());
            number(began, "falseDetectionsPerSquareMetre", beginning.clutter());
            number(began, "nobodys", beginning.nobodys());
        }
        line.put("then", object.fate().name().toLowerCase(Locale.ROOT)).put("confirmed", object.confirmed());
        try {
            return JSON.writeValueAsString(line);
        } catch (JsonProcessingException e) {
            throw new IllegalStateException("a tree of JSON can be written", e);
        }
    }

    private static void detection(ObjectNode node, ObjectEvidence.Gated detection) {
        node.put("part", detection.part()).put("index", detection.index()).put("id", detection.id());
        number(node, "probability", detection.probability());
        number(node, "distanceSigmas", detection.distanceSigmas());
        number(node, "likelihoodRatio", detection.likelihoodRatio());
        number(node, "nobodys", detection.nobodys());
        ArrayNode others = node.putArray("others");
        detection.others().forEach(other -> number(
                others.addObject().put("object", other.identity().text()), "probability", other.probability()));
    }

    private static void number(ObjectNode node, String name, double value) {
        if (Double.isFinite(value)) {
            node.put(name, value);
        } else {
            node.putNull(name);
        }
    }
}
