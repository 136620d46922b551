//! A dataset as bytes: protobuf, and JSON by its canonical mapping.

use prost::Message;
use prost_reflect::{DescriptorPool, DynamicMessage};

use crate::FILE_DESCRIPTOR_SET;
use crate::ord::Dataset;

/// Why a dataset could not be written.
#[derive(Debug, thiserror::Error)]
#[error("the dataset cannot be written: {reason}")]
pub struct RecordError {
    reason: String,
}

/// The dataset as protobuf, the bytes of a `.pb` file.
pub fn protobuf(dataset: &Dataset) -> Vec<u8> {
    dataset.encode_to_vec()
}

/// The dataset as JSON by protobuf's canonical mapping.
///
/// # Errors
/// [`RecordError`] where the schema does not fit the message.
pub fn json(dataset: &Dataset) -> Result<String, RecordError> {
    let told = |reason: &dyn std::fmt::Display| RecordError {
        reason: reason.to_string(),
    };
    let pool = DescriptorPool::decode(FILE_DESCRIPTOR_SET).map_err(|error| told(&error))?;
    let descriptor = pool.get_message_by_name("ord.Dataset");
    let descriptor = descriptor.ok_or_else(|| told(&"the schema has no `ord.Dataset`"))?;
    let bytes = protobuf(dataset);
    let message = DynamicMessage::decode(descriptor, bytes.as_slice());
    let message = message.map_err(|error| told(&error))?;
    let mut text = serde_json::to_string_pretty(&message).map_err(|error| told(&error))?;
    text.push('\n');
    Ok(text)
}
