//! What clients that know nothing of enolattice find: health and reflection.

use tokio_stream::StreamExt;
use tonic::transport::{Channel, Endpoint};
use tonic_health::pb::HealthCheckRequest;
use tonic_health::pb::health_check_response::ServingStatus;
use tonic_health::pb::health_client::HealthClient;
use tonic_reflection::pb::{v1, v1alpha};

use crate::live::Live;

const SERVICES: [&str; 3] = [
    "enolattice.v1.ChemistryService",
    "enolattice.v1.JobService",
    "enolattice.v1.PlanService",
];

async fn channel(live: &Live) -> Channel {
    let endpoint = Endpoint::from_shared(live.url.clone()).expect("an address");
    endpoint.connect().await.expect("connects")
}

#[tokio::test(flavor = "multi_thread")]
async fn health_is_told_for_the_server_and_each_service() {
    let live = Live::start().await;
    let mut health = HealthClient::new(channel(&live).await);
    for service in std::iter::once("").chain(SERVICES) {
        let request = HealthCheckRequest {
            service: service.into(),
        };
        let answer = health.check(request).await.expect("an answer").into_inner();
        assert_eq!(answer.status(), ServingStatus::Serving, "{service}");
    }
    let request = HealthCheckRequest {
        service: "enolattice.v1.Nothing".into(),
    };
    let status = health.check(request).await.expect_err("is unknown");
    assert_eq!(status.code(), tonic::Code::NotFound);
    live.stop().await;
}

#[tokio::test(flavor = "multi_thread")]
async fn health_turns_when_the_server_stops() {
    let live = Live::start().await;
    let mut health = HealthClient::new(channel(&live).await);
    let request = HealthCheckRequest {
        service: SERVICES[1].into(),
    };
    let mut states = health
        .watch(request)
        .await
        .expect("is watched")
        .into_inner();
    let first = states.next().await.expect("a state").expect("no error");
    assert_eq!(first.status(), ServingStatus::Serving);
    let stopped = tokio::spawn(live.stop());
    let second = states.next().await.expect("a state").expect("no error");
    assert_eq!(second.status(), ServingStatus::NotServing);
    drop((states, health));
    stopped.await.expect("a clean end");
}

#[tokio::test(flavor = "multi_thread")]
async fn reflection_v1_lists_the_services_with_their_imports() {
    use v1::server_reflection_client::ServerReflectionClient;
    use v1::server_reflection_request::MessageRequest;
    use v1::server_reflection_response::MessageResponse;
    let live = Live::start().await;
    let mut reflection = ServerReflectionClient::new(channel(&live).await);
    let questions = [
        MessageRequest::ListServices(String::new()),
        MessageRequest::FileContainingSymbol("enolattice.v1.Explanation".into()),
        MessageRequest::FileByFilename("google/api/field_behavior.proto".into()),
    ];
    let requests = questions.map(|question| v1::ServerReflectionRequest {
        host: String::new(),
        message_request: Some(question),
    });
    let answers = reflection
        .server_reflection_info(tokio_stream::iter(requests))
        .await;
    let answers: Vec<_> = answers.expect("answers").into_inner().collect().await;
    let answers: Vec<_> = answers
        .into_iter()
        .map(|answer| {
            answer
                .expect("no error")
                .message_response
                .expect("an answer")
        })
        .collect();
    match &answers[0] {
        MessageResponse::ListServicesResponse(list) => {
            let names: Vec<_> = list
                .service
                .iter()
                .map(|service| service.name.as_str())
                .collect();
            assert!(
                SERVICES.iter().all(|service| names.contains(service)),
                "{names:?}"
            );
        }
        other => panic!("{other:?}"),
    }
    for answer in &answers[1..] {
        assert!(
            matches!(answer, MessageResponse::FileDescriptorResponse(_)),
            "{answer:?}"
        );
    }
    live.stop().await;
}

#[tokio::test(flavor = "multi_thread")]
async fn reflection_v1alpha_answers_older_clients() {
    use v1alpha::server_reflection_client::ServerReflectionClient;
    use v1alpha::server_reflection_request::MessageRequest;
    use v1alpha::server_reflection_response::MessageResponse;
    let live = Live::start().await;
    let mut reflection = ServerReflectionClient::new(channel(&live).await);
    let request = v1alpha::ServerReflectionRequest {
        host: String::new(),
        message_request: Some(MessageRequest::FileContainingSymbol(SERVICES[1].into())),
    };
    let answers = reflection
        .server_reflection_info(tokio_stream::iter([request]))
        .await;
    let answer = answers
        .expect("answers")
        .into_inner()
        .next()
        .await
        .expect("one")
        .expect("sound");
    assert!(matches!(
        answer.message_response,
        Some(MessageResponse::FileDescriptorResponse(_))
    ));
    live.stop().await;
}
