"""The service as a Python program sees it, over plain grpcio."""

import itertools
import json
import subprocess

import grpc
import pytest
from google.protobuf import descriptor_pool, message_factory
from google.rpc import error_details_pb2
from grpc_health.v1 import health_pb2, health_pb2_grpc
from grpc_reflection.v1alpha.proto_reflection_descriptor_database import (
    ProtoReflectionDescriptorDatabase,
)
from grpc_status import rpc_status


@pytest.fixture(scope="module")
def jobs(server, stubs):
    return stubs.job_service_grpc.JobServiceStub(server.channel)


@pytest.fixture(scope="module")
def chemistry(server, stubs):
    return stubs.chemistry_service_grpc.ChemistryServiceStub(server.channel)


def small_campaign(stubs):
    """2 substrates x 3 bases x 2 electrophiles x 2 solvents."""
    reagent = lambda name: stubs.reagent.Reagent(name=name)
    medium = lambda name: stubs.reagent.Medium(
        components=[stubs.reagent.SolventComponent(solvent=reagent(name))]
    )
    return stubs.campaign.Campaign(
        title="From Python",
        substrates=[
            stubs.reagent.Substrate(name="ethyl phenylacetate", smiles="CCOC(=O)Cc1ccccc1"),
            stubs.reagent.Substrate(name="cyclohexanone", smiles="O=C1CCCCC1"),
        ],
        bases={"reagents": [reagent(name) for name in ("LDA", "KOtBu", "Et3N")]},
        electrophiles={"reagents": [reagent("MeI"), stubs.reagent.Reagent(smiles="BrCc1ccccc1")]},
        solvents={"media": [medium("THF"), medium("DMF")]},
        conditions={"temperature_c": [-20.0], "formation_temperature_c": [-78.0]},
        target={"yield_at_least": 0.5},
    )


@pytest.fixture(scope="module")
def done(jobs, stubs):
    """A job watched to its end."""
    submitted = jobs.SubmitJob(stubs.job.SubmitJobRequest(campaign=small_campaign(stubs)))
    request = stubs.job.WatchJobRequest(job_id=submitted.job_id)
    states = [message.job for message in jobs.WatchJob(request)]
    assert states[-1].state == stubs.job.JOB_STATE_DONE
    assert states[-1].cells == states[-1].cells_done == 24
    assert [job.cells_done for job in states] == sorted(job.cells_done for job in states)
    return states[-1]


def pages(jobs, stubs, **arguments):
    """All cells of a ranking, page by page."""
    token = ""
    while True:
        request = stubs.ranking.RankCellsRequest(page_token=token, **arguments)
        page = jobs.RankCells(request)
        yield from page.cells
        token = page.next_page_token
        if not token:
            return


def refusal(call):
    """Status, ErrorInfo and BadRequest of a call that is refused."""
    with pytest.raises(grpc.RpcError) as caught:
        call()
    status = rpc_status.from_call(caught.value)
    info, bad = error_details_pb2.ErrorInfo(), error_details_pb2.BadRequest()
    for detail in status.details:
        for message in (info, bad):
            if detail.Is(message.DESCRIPTOR):
                detail.Unpack(message)
    assert info.domain == "enolattice.v1"
    return caught.value.code(), info, bad


def test_pages_end_to_end_are_the_ranking(jobs, stubs, done):
    whole = list(pages(jobs, stubs, job_id=done.job_id, page_size=1000))
    assert sorted(cell.cell for cell in whole) == list(range(24))
    assert list(pages(jobs, stubs, job_id=done.job_id, page_size=5)) == whole
    assert list(pages(jobs, stubs, job_id=done.job_id)) == whole
    yields = [c.expected_yield if c.HasField("expected_yield") else -1 for c in whole]
    assert yields == sorted(yields, reverse=True)


def test_filters_and_orders(jobs, stubs, done):
    whole = list(pages(jobs, stubs, job_id=done.job_id))
    in_thf = list(pages(jobs, stubs, job_id=done.job_id, filter='solvent = "THF"'))
    assert [c.cell for c in in_thf] == [c.cell for c in whole if c.solvent == "THF"]
    best = list(
        pages(jobs, stubs, job_id=done.job_id, best_per=stubs.ranking.AXIS_SUBSTRATE)
    )
    firsts = {}
    for cell in whole:
        firsts.setdefault(cell.substrate, cell.cell)
    assert {c.substrate: c.cell for c in best} == firsts
    by_p_hit = list(pages(jobs, stubs, job_id=done.job_id, order_by="p_hit desc"))
    p_hits = [c.p_hit if c.HasField("p_hit") else -1 for c in by_p_hit]
    assert p_hits == sorted(p_hits, reverse=True)


def test_the_command_line_prints_the_same_ranking(binary, server, jobs, stubs, done):
    printed = subprocess.run(
        [binary, "rank", done.job_id, "--json", "--limit", "0", "--server", server.address],
        check=True,
        capture_output=True,
        text=True,
    ).stdout
    rows = [json.loads(line) for line in printed.splitlines()]
    cells = list(pages(jobs, stubs, job_id=done.job_id))
    assert [row["cell"] for row in rows] == [cell.cell for cell in cells]
    for row, cell in zip(rows, cells):
        has = cell.HasField("expected_yield")
        assert row["expected_yield"] == (cell.expected_yield if has else None)
        assert row["temperature_c"] == cell.conditions.temperature_c
        assert len(row["cautions"]) == len(cell.cautions)


def test_a_cell_is_explained_both_ways(chemistry, stubs, jobs, done):
    cell = next(pages(jobs, stubs, job_id=done.job_id))
    answer = chemistry.ExplainCell(
        stubs.explanation.ExplainCellRequest(
            job_cell={"job_id": done.job_id, "cell": cell.cell}
        )
    )
    assert answer.cell.substrate.name == cell.substrate
    assert answer.explanation.model == done.model_fingerprint
    assert len(answer.explanation.sites) > 0
    given = stubs.explanation.GivenCell(
        substrate={"smiles": answer.cell.substrate.smiles},
        base={"name": answer.cell.base},
        electrophile={"smiles": answer.cell.electrophile.smiles},
        solvent={"components": [{"solvent": {"name": answer.cell.solvent}}]},
        conditions=answer.cell.conditions,
        yield_at_least=0.5,
    )
    again = chemistry.ExplainCell(stubs.explanation.ExplainCellRequest(given_cell=given))
    assert again.explanation.expected_yield == answer.explanation.expected_yield
    assert again.explanation.product_smiles == answer.explanation.product_smiles


def test_sites_and_reagents(chemistry, stubs):
    answer = chemistry.ListSites(stubs.acidity.ListSitesRequest(smiles=["CC(=O)CC(=O)OCC"]))
    (molecule,) = answer.molecules
    assert molecule.sites[0].atom == 3, "the CH2 between the carbonyls is the most acidic"
    names, token = [], ""
    while True:
        page = chemistry.ListReagents(
            stubs.library.ListReagentsRequest(page_size=7, page_token=token)
        )
        names += [(reagent.kind, reagent.name) for reagent in page.reagents]
        token = page.next_page_token
        if not token:
            break
    assert len(names) == len(set(names)) > 40
    assert (stubs.library.REAGENT_KIND_BASE, "LDA") in names


def test_a_request_id_makes_one_job(jobs, stubs):
    request = stubs.job.SubmitJobRequest(
        campaign=small_campaign(stubs), request_id="2f6d1c1e-8f0a-4c77-8a55-0a4a3f1f9a10"
    )
    assert jobs.SubmitJob(request).job_id == jobs.SubmitJob(request).job_id
    request.campaign.title = "Another"
    request.campaign.conditions.time_h.append(1.0)
    code, info, _ = refusal(lambda: jobs.SubmitJob(request))
    assert (code, info.reason) == (grpc.StatusCode.ALREADY_EXISTS, "REQUEST_ID_REUSED")


def test_a_campaign_may_come_in_chunks(jobs, stubs):
    campaign = small_campaign(stubs)
    whole = jobs.SubmitJob(stubs.job.SubmitJobRequest(campaign=campaign, validate_only=True))
    substrates = list(campaign.substrates)
    electrophiles = list(campaign.electrophiles.reagents)
    del campaign.substrates[:], campaign.electrophiles.reagents[:]
    part = stubs.job.SubmitJobStreamRequest
    header = part(
        header=stubs.job.SubmitJobRequest(campaign=campaign, validate_only=True)
    )
    chunks = [
        part(chunk=stubs.job.AxisChunk(substrates=[s], electrophiles=[e]))
        for s, e in itertools.zip_longest(substrates, electrophiles)
    ]
    streamed = jobs.SubmitJobStream(iter([header] + chunks))
    assert streamed.cells == whole.cells == 24
    assert streamed.campaign_fingerprint == whole.campaign_fingerprint
    assert streamed.job_id == ""


def test_measured_yields_come_back_beside_the_computed_ones(jobs, chemistry, stubs, done):
    campaign = small_campaign(stubs)
    row = stubs.campaign.MeasuredYield(
        substrate="cyclohexanone",
        base="LDA",
        electrophile="iodomethane",
        solvent="THF",
        temperature_c=-20.0,
        yield_fraction=0.62,
        sigma=0.03,
        note="by GC",
    )
    campaign.measured.append(row)
    submitted = jobs.SubmitJob(stubs.job.SubmitJobRequest(campaign=campaign))
    assert submitted.campaign_fingerprint == done.campaign_fingerprint
    for _ in jobs.WatchJob(stubs.job.WatchJobRequest(job_id=submitted.job_id)):
        pass
    cells = list(pages(jobs, stubs, job_id=submitted.job_id))
    (measured,) = [cell for cell in cells if cell.HasField("measured_yield")]
    assert (measured.substrate, measured.base, measured.electrophile) == ("cyclohexanone", "LDA", "MeI")
    assert measured.measured_yield == 0.62
    job_cell = {"job_id": submitted.job_id, "cell": measured.cell}
    told = chemistry.ExplainCell(stubs.explanation.ExplainCellRequest(job_cell=job_cell))
    assert (told.cell.measured.sigma, told.cell.measured.note) == (0.03, "by GC")

    row.yield_fraction = 62.0
    row.base = "LDDA"
    campaign.measured.append(row)
    code, _, bad = refusal(lambda: jobs.SubmitJob(stubs.job.SubmitJobRequest(campaign=campaign)))
    assert code == grpc.StatusCode.INVALID_ARGUMENT
    assert [(v.field, v.reason) for v in bad.field_violations] == [
        ("campaign.measured[1].base", "REAGENT_UNKNOWN"),
        ("campaign.measured[1].yield_fraction", "VALUE_OUT_OF_RANGE"),
    ]


def test_every_fault_of_a_campaign_is_told(jobs, stubs):
    campaign = small_campaign(stubs)
    campaign.substrates[1].smiles = "C1CC"
    campaign.bases.reagents[0].name = "LDDA"
    campaign.conditions.temperature_c.append(-400.0)
    code, info, bad = refusal(
        lambda: jobs.SubmitJob(stubs.job.SubmitJobRequest(campaign=campaign))
    )
    assert (code, info.reason) == (grpc.StatusCode.INVALID_ARGUMENT, "INPUT_INVALID")
    told = {violation.field: violation.reason for violation in bad.field_violations}
    assert told["campaign.substrates[1].smiles"] == "STRUCTURE_INVALID"
    assert told["campaign.bases.reagents[0]"] == "REAGENT_UNKNOWN"
    assert told["campaign.conditions.temperature_c[1]"] == "VALUE_OUT_OF_RANGE"
    assert all(reason in stubs.error.ErrorReason.keys() for reason in told.values())


def test_many_faults_do_not_burst_the_trailers(jobs, stubs):
    campaign = small_campaign(stubs)
    campaign.substrates.extend(
        stubs.reagent.Substrate(name=f"broken {i}", smiles="C1CC" + "=" * i) for i in range(300)
    )
    request = stubs.job.SubmitJobRequest(campaign=campaign, validate_only=True)
    _, info, bad = refusal(lambda: jobs.SubmitJob(request))
    assert info.metadata["faults"] == "300"
    listed = int(info.metadata["faults_listed"])
    assert 0 < listed < 200
    assert len(bad.field_violations) == listed + 1
    assert bad.field_violations[-1].reason == "MORE_FAULTS"
    assert f"{300 - listed} more faults" in bad.field_violations[-1].description


def test_a_client_that_takes_large_trailers_gets_every_fault(server, stubs):
    campaign = small_campaign(stubs)
    campaign.substrates.extend(
        stubs.reagent.Substrate(name=f"broken {i}", smiles="C1CC" + "=" * i) for i in range(300)
    )
    request = stubs.job.SubmitJobRequest(campaign=campaign, validate_only=True)
    limits = ("grpc.max_metadata_size", "grpc.absolute_max_metadata_size")
    options = [(limit, 1 << 20) for limit in limits]
    with grpc.insecure_channel(server.address, options=options) as channel:
        jobs = stubs.job_service_grpc.JobServiceStub(channel)
        metadata = [("enolattice-detail-bytes", "500000")]
        _, _, bad = refusal(lambda: jobs.SubmitJob(request, metadata=metadata))
    assert len(bad.field_violations) == 201
    assert "100 more faults" in bad.field_violations[-1].description


def test_faults_of_the_message_and_of_its_names_come_in_one_answer(jobs, stubs):
    campaign = small_campaign(stubs)
    campaign.solvents.media[1].components.append(stubs.reagent.SolventComponent())
    campaign.bases.reagents[0].name = "LDDA"
    campaign.substrates[0].stock.price_per_g = 12.5
    request = stubs.job.SubmitJobRequest(campaign=campaign, request_id="x" * 200)
    _, _, bad = refusal(lambda: jobs.SubmitJob(request))
    told = [violation.field for violation in bad.field_violations]
    assert "request_id" in told
    assert "campaign.solvents.media[1].components[1].solvent.name" in told
    assert "campaign.bases.reagents[0]" in told
    assert "campaign.substrates[0].currency" in told


def test_mixtures_additives_and_a_dry_run(jobs, stubs):
    campaign = small_campaign(stubs)
    parts = (("THF", 0.8), ("DMF", 0.2))
    campaign.solvents.media[1].CopyFrom(
        stubs.reagent.Medium(
            components=[
                stubs.reagent.SolventComponent(
                    solvent=stubs.reagent.Reagent(name=name), volume_fraction=part
                )
                for name, part in parts
            ]
        )
    )
    hmpa = stubs.reagent.Additive(reagent=stubs.reagent.Reagent(name="HMPA"), equiv=2.0)
    campaign.additives.sets.extend(
        [stubs.reagent.AdditiveSet(), stubs.reagent.AdditiveSet(additives=[hmpa])]
    )
    campaign.substrates[0].stock.stock_mg = 500
    request = stubs.job.SubmitJobRequest(campaign=campaign, dry_run=True)
    answer = jobs.SubmitJob(request)
    assert (answer.job_id, answer.cells) == ("", 48)
    sizes = {size.axis: size.values for size in answer.dry_run.axes}
    assert (sizes["additives"], sizes["solvents"]) == (2, 2)
    assert answer.dry_run.cells_scored == answer.dry_run.cells_looked_at == 48
    assert answer.dry_run.disk_bytes > 0


def test_unknown_things_have_their_reasons(jobs, chemistry, stubs, done):
    code, info, _ = refusal(lambda: jobs.GetJob(stubs.job.GetJobRequest(job_id="nothing")))
    assert (code, info.reason) == (grpc.StatusCode.NOT_FOUND, "JOB_UNKNOWN")
    request = stubs.explanation.ExplainCellRequest(job_cell={"job_id": done.job_id, "cell": 24})
    code, info, _ = refusal(lambda: chemistry.ExplainCell(request))
    assert (code, info.reason) == (grpc.StatusCode.NOT_FOUND, "CELL_UNKNOWN")
    assert info.metadata["last_cell"] == "23"
    request = stubs.job.CancelJobRequest(job_id=done.job_id)
    code, info, _ = refusal(lambda: jobs.CancelJob(request))
    assert (code, info.reason) == (grpc.StatusCode.FAILED_PRECONDITION, "JOB_WRONG_STATE")
    request = stubs.ranking.RankCellsRequest(job_id=done.job_id, page_token="damaged")
    code, info, _ = refusal(lambda: jobs.RankCells(request))
    assert (code, info.reason) == (grpc.StatusCode.INVALID_ARGUMENT, "PAGE_TOKEN_INVALID")
    request = stubs.ranking.RankCellsRequest(job_id=done.job_id, filter="p_hit >> 1", skip=-1)
    code, _, bad = refusal(lambda: jobs.RankCells(request))
    assert [violation.field for violation in bad.field_violations] == ["skip"]


def test_a_plan_is_made_and_its_transfers_add_up(server, stubs, jobs):
    """The example of docs/api.md, on a plate of 24 wells; every well gets what its doses say."""
    plans = stubs.plan_service_grpc.PlanServiceStub(server.channel)
    campaign = small_campaign(stubs)
    campaign.conditions.Clear()
    campaign.conditions.temperature_c.append(25.0)
    submitted = jobs.SubmitJob(stubs.job.SubmitJobRequest(campaign=campaign))
    request = stubs.job.WatchJobRequest(job_id=submitted.job_id)
    assert [message.job for message in jobs.WatchJob(request)][-1].cells_done == 24
    plan = plans.PlanPlates(
        stubs.plan_service.PlanPlatesRequest(
            job_id=submitted.job_id,
            request={"plates": {"wells": 24}, "choice": {"draws": 16}, "deck": {"inert": True}},
        )
    )
    assert plan.plates[0].well_count <= 24
    get = stubs.plan_service.GetPlanRequest(plan_id=plan.plan_id)
    assert plans.GetPlan(get) == plan
    listed = plans.ListPlans(stubs.plan_service.ListPlansRequest(job_id=submitted.job_id))
    assert [summary.plan_id for summary in listed.plans] == [plan.plan_id]

    delivered = {}
    request = stubs.plan_service.StreamTransfersRequest(plan_id=plan.plan_id)
    for part in plans.StreamTransfers(request):
        columns = (part.plate_indices, part.rows, part.columns, part.stock_indices, part.volumes_nl)
        for plate, row, column, stock, volume_nl in zip(*columns, strict=True):
            if part.plates[plate] == plan.plates[0].name:
                well = f"{chr(64 + row)}{column}"
                delivered[well, stock] = delivered.get((well, stock), 0.0) + volume_nl
    stocks = []
    for part in plans.StreamStocks(stubs.plan_service.StreamStocksRequest(plan_id=plan.plan_id)):
        stocks.extend(part.stocks)
    assert len(stocks) == plan.stock_count
    on_plate = {i for i, stock in enumerate(stocks) if stock.role != stubs.plan.LIQUID_ROLE_DILUENT}
    dosed = {}
    for part in plans.StreamWells(stubs.plan_service.StreamWellsRequest(plan_id=plan.plan_id)):
        for well in part.wells:
            for dose in well.doses:
                if dose.stock_index in on_plate and dose.volume_nl > 0:
                    dosed[well.well, dose.stock_index] = dose.volume_nl
    assert dosed == pytest.approx(delivered)

    wrong = stubs.plan_service.PlanPlatesRequest(
        job_id=submitted.job_id, request={"plates": {"wells": 95, "count": 0}}
    )
    code, info, bad = refusal(lambda: plans.PlanPlates(wrong))
    assert (code, info.reason) == (grpc.StatusCode.INVALID_ARGUMENT, "INPUT_INVALID")
    fields = {violation.field for violation in bad.field_violations}
    assert fields == {"request.plates.wells", "request.plates.count"}
    get = stubs.plan_service.GetPlanRequest(plan_id="nothing")
    code, info, _ = refusal(lambda: plans.GetPlan(get))
    assert (code, info.reason) == (grpc.StatusCode.NOT_FOUND, "PLAN_UNKNOWN")


SERVICES = {"enolattice.v1.JobService", "enolattice.v1.ChemistryService", "enolattice.v1.PlanService"}


def test_health(server):
    health = health_pb2_grpc.HealthStub(server.channel)
    for service in {""} | SERVICES:
        answer = health.Check(health_pb2.HealthCheckRequest(service=service))
        assert answer.status == health_pb2.HealthCheckResponse.SERVING


def test_a_client_without_stubs_finds_its_way_by_reflection(server, done):
    database = ProtoReflectionDescriptorDatabase(server.channel)
    assert SERVICES <= set(database.get_services())
    pool = descriptor_pool.DescriptorPool(database)
    method = pool.FindServiceByName("enolattice.v1.JobService").FindMethodByName("GetJob")
    question = message_factory.GetMessageClass(method.input_type)
    answer = message_factory.GetMessageClass(method.output_type)
    get_job = server.channel.unary_unary(
        f"/{method.containing_service.full_name}/{method.name}",
        request_serializer=question.SerializeToString,
        response_deserializer=answer.FromString,
    )
    job = get_job(question(job_id=done.job_id))
    assert (job.title, job.cells) == ("From Python", 24)
